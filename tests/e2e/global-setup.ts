import { ensureBuild } from '../../scripts/lib/ensure-build'
import { testCluster } from '../../scripts/lib/own-cluster'
import { startCluster } from '../../scripts/lib/postgres/start-cluster'
import { readOrMakeSecrets } from '../../scripts/lib/secrets'
import { readSettings } from '../../scripts/lib/settings'

/** Once a run: the application built from these sources, and the tests' database server. The schools are started by who needs one. */
export default async function setup(): Promise<void> {
  const { dataDir, testDatabasePort } = readSettings(process.env)
  await startCluster(testCluster(dataDir, testDatabasePort, readOrMakeSecrets(dataDir)), line => console.log(line))
  await ensureBuild(dataDir, line => console.log(line))
}
