import type { TestProject } from 'vitest/node'
import { testCluster } from '../../scripts/lib/own-cluster'
import { ensureDatabase } from '../../scripts/lib/postgres/ensure-database'
import { startCluster } from '../../scripts/lib/postgres/start-cluster'
import { readOrMakeSecrets } from '../../scripts/lib/secrets'
import { readSettings } from '../../scripts/lib/settings'
import { ensureTemplate } from './template-database'

declare module 'vitest' {
  export interface ProvidedContext {
    /** A database of the tests' cluster, for making others. */
    databaseUrl: string
    templateName: string
  }
}

/** Once a run: the tests' own cluster, and a database with the migrations applied to copy from. The cluster stays up. */
export default async function setup(project: TestProject): Promise<void> {
  const { dataDir, testDatabasePort } = readSettings(process.env)
  const secrets = readOrMakeSecrets(dataDir)
  const cluster = testCluster(dataDir, testDatabasePort, secrets)
  await startCluster(cluster, line => console.log(line))
  const url = await ensureDatabase(cluster, { name: 'witness', password: secrets.databasePassword, mayCreateDatabases: true }, 'witness_mark')
  project.provide('databaseUrl', url)
  project.provide('templateName', await ensureTemplate(url, dataDir))
}
