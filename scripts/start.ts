/**
 * `npm start`: the demo school on this machine, from nothing: database, stand-ins, seed, build, web and worker.
 * Ctrl-C, or `npm run stop`, ends all of it.
 */
import { ensureBuild } from './lib/ensure-build'
import { ensureSchool } from './lib/ensure-school'
import { ownCluster } from './lib/own-cluster'
import { ensureDatabase } from './lib/postgres/ensure-database'
import { startCluster } from './lib/postgres/start-cluster'
import { stopServer } from './lib/postgres/stop-server'
import { Problem } from './lib/problem'
import { refuseOutsideDemo } from './lib/refuse-outside-demo'
import { runCommand } from './lib/run-command'
import { readOrMakeSecrets } from './lib/secrets'
import { readSettings } from './lib/settings'
import { applicationEnv, startStack, startStandIns, type StackOptions } from './lib/start-stack'
import { takeThePlace } from './lib/take-the-place'

const say = (line: string) => console.log(line)

await runCommand(async () => {
  const began = performance.now()
  const settings = readSettings(process.env)
  if (process.argv.includes('--lan')) {
    throw new Problem('--lan (phones on the same network, over https) is not there yet. Start without it: the school answers on this machine.')
  }
  refuseOutsideDemo(process.env, settings.host)
  const secrets = readOrMakeSecrets(settings.dataDir)
  const url = `http://${settings.host}:${settings.webPort}`
  const place = await takeThePlace(settings, url)

  /** What has to be ended, last begun first. */
  const endings: (() => Promise<void> | void)[] = [place.leave]
  let ending: Promise<void> | null = null
  const end = () => ending ??= (async () => {
    for (const one of endings.reverse()) await one()
  })()
  const asked = new Promise<void>((resolve) => {
    for (const signal of ['SIGINT', 'SIGTERM', 'SIGHUP'] as const) process.on(signal, () => resolve())
  })
  void asked.then(async () => {
    say('\nEnding ...')
    await end()
    process.exit(0)
  })

  try {
    const cluster = ownCluster(settings.dataDir, settings.databasePort, secrets)
    const owner = { name: 'witness', password: secrets.databasePassword }
    const options: StackOptions = {
      ...settings, secrets, env: process.env, databaseUrl: settings.given.databaseUrl ?? '',
      say: line => say(line), onChange: running => place.record(running),
    }

    const standIns = await startStandIns(options)
    endings.push(() => standIns.close())
    const prepareSchool = async () => {
      if (settings.given.databaseUrl) return
      const realDir = await startCluster(cluster, say)
      endings.push(() => stopServer(realDir))
      await ensureDatabase(cluster, { ...owner, mayCreateDatabases: false }, 'postgres')
      options.databaseUrl = await ensureSchool({ cluster, owner, database: 'witness_mark', env: applicationEnv(options) }, say)
    }
    // The first time both take a while, and neither needs the other.
    await Promise.all([prepareSchool(), ensureBuild(settings.dataDir, say)])

    const stack = await startStack(options)
    endings.push(() => stack.stop())
    say([
      '',
      `Witness Mark is at ${url}   (ready in ${((performance.now() - began) / 1000).toFixed(1)} s)`,
      ...(standIns.mail ? [`Its mail is at     ${standIns.mail.pageUrl}`] : []),
      ...(standIns.pay ? [`Cards are paid at  ${standIns.pay.url}   (nothing is taken)`] : []),
      '',
      'Sign in as <first name>@sallowbeck.example with the password slow-hands-true-numbers',
      '  imre, bettany (students)   freya (finished)   hanne (lead instructor)   corin (office)   ingrid (safety)',
      `Strangers ask for a place at ${url}/courses`,
      '',
      'Ctrl-C ends it.',
    ].join('\n'))
    await asked
  }
  catch (thrown) {
    await end()
    throw thrown
  }
})
