/** `npm run dev`: database, stand-ins and demo school as in `npm start`, and Nuxt's development server in front. */
import { spawn } from 'node:child_process'
import { once } from 'node:events'
import { ensureSchool } from './lib/ensure-school'
import { ownCluster } from './lib/own-cluster'
import { ensureDatabase } from './lib/postgres/ensure-database'
import { startCluster } from './lib/postgres/start-cluster'
import { projectRoot } from './lib/project-root'
import { refuseOutsideDemo } from './lib/refuse-outside-demo'
import { runCommand } from './lib/run-command'
import { readOrMakeSecrets } from './lib/secrets'
import { readSettings } from './lib/settings'
import { applicationEnv, startStandIns, type StackOptions } from './lib/start-stack'
import { takeThePlace } from './lib/take-the-place'

await runCommand(async () => {
  const settings = readSettings(process.env)
  refuseOutsideDemo(process.env, settings.host)
  const secrets = readOrMakeSecrets(settings.dataDir)
  const place = await takeThePlace(settings, `http://${settings.host}:${settings.webPort}`)
  const options: StackOptions = { ...settings, secrets, env: process.env, databaseUrl: settings.given.databaseUrl ?? '', say: console.log }
  const standIns = await startStandIns(options)
  try {
    if (!settings.given.databaseUrl) {
      const cluster = ownCluster(settings.dataDir, settings.databasePort, secrets)
      const owner = { name: 'witness', password: secrets.databasePassword }
      await startCluster(cluster, console.log)
      await ensureDatabase(cluster, { ...owner, mayCreateDatabases: false }, 'postgres')
      options.databaseUrl = await ensureSchool({ cluster, owner, database: 'witness_mark', env: applicationEnv(options) }, console.log)
    }
    // The database stays up: the next start is quicker, and `npm run stop` ends it.
    const nuxt = spawn(process.execPath, ['node_modules/nuxt/bin/nuxt.mjs', 'dev', '--host', settings.host, '--port', String(settings.webPort)], {
      cwd: projectRoot, stdio: 'inherit', env: { ...applicationEnv(options), NUXT_ROLE: 'both' },
    })
    for (const signal of ['SIGINT', 'SIGTERM'] as const) process.on(signal, () => nuxt.kill(signal))
    await once(nuxt, 'exit')
  }
  finally {
    await standIns.close()
    place.leave()
  }
})
