import { join } from 'node:path'
import type { Cluster } from './postgres/cluster'
import type { Secrets } from './secrets'

/** The school's own cluster of this copy of the project. */
export const ownCluster = (dataDir: string, port: number, secrets: Secrets): Cluster => ({
  dir: join(dataDir, 'postgres'), port, admin: { name: 'witness_admin', password: secrets.databaseAdminPassword }, durable: true,
})

/** The tests' cluster: thrown away without regret, so it never waits for the disk. */
export const testCluster = (dataDir: string, port: number, secrets: Secrets): Cluster => ({
  dir: join(dataDir, 'test-postgres'), port, admin: { name: 'witness_admin', password: secrets.databaseAdminPassword }, durable: false,
})
