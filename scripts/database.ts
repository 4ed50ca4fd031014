/**
 * `npm run database`: brings up the school's PostgreSQL and prints its address, for the ORM's command line and for psql.
 * `npm run database -- --test`: the same for the tests' cluster.
 */
import { ownCluster, testCluster } from './lib/own-cluster'
import { ensureDatabase } from './lib/postgres/ensure-database'
import { startCluster } from './lib/postgres/start-cluster'
import { runCommand } from './lib/run-command'
import { readOrMakeSecrets } from './lib/secrets'
import { readSettings } from './lib/settings'

await runCommand(async () => {
  const settings = readSettings(process.env)
  const secrets = readOrMakeSecrets(settings.dataDir)
  const forTests = process.argv.includes('--test')
  const cluster = forTests ? testCluster(settings.dataDir, settings.testDatabasePort, secrets) : ownCluster(settings.dataDir, settings.databasePort, secrets)
  await startCluster(cluster, line => process.stderr.write(line + '\n'))
  const owner = { name: 'witness', password: secrets.databasePassword, mayCreateDatabases: forTests }
  process.stdout.write(await ensureDatabase(cluster, owner, 'witness_mark') + '\n')
})
