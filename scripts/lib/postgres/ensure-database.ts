import pg from 'pg'
import { Problem } from '../problem'
import { clusterHost, type Cluster } from './cluster'

export type DatabaseOwner = { name: string, password: string, mayCreateDatabases: boolean }

/** The address of a database on that cluster for that user. */
export const databaseUrl = (cluster: Cluster, user: { name: string, password: string }, database: string): string =>
  `postgresql://${user.name}:${encodeURIComponent(user.password)}@${clusterHost}:${cluster.port}/${database}`

/**
 * Makes the application's role and its database if they are not there.
 * The application never connects as the superuser, so that a refused UPDATE stays refused.
 *
 * @throws {Problem} when the kept password does not open the cluster
 */
export async function ensureDatabase(cluster: Cluster, owner: DatabaseOwner, database: string): Promise<string> {
  const client = new pg.Client({ connectionString: databaseUrl(cluster, cluster.admin, 'postgres') })
  try {
    await client.connect()
  }
  catch (error) {
    if ((error as { code?: string }).code === '28P01') {
      throw new Problem(`The password in secrets.json does not open the database in ${cluster.dir}. Put the old secrets.json back, or remove that folder to begin again.`)
    }
    throw error
  }
  try {
    const name = client.escapeIdentifier(owner.name)
    const options = `LOGIN NOSUPERUSER ${owner.mayCreateDatabases ? 'CREATEDB' : 'NOCREATEDB'} PASSWORD ${client.escapeLiteral(owner.password)}`
    const role = await client.query('select 1 from pg_roles where rolname = $1', [owner.name])
    await client.query(`${role.rowCount ? 'ALTER' : 'CREATE'} ROLE ${name} ${options}`)
    const found = await client.query('select 1 from pg_database where datname = $1', [database])
    if (!found.rowCount) await client.query(`CREATE DATABASE ${client.escapeIdentifier(database)} OWNER ${name}`)
  }
  finally {
    await client.end()
  }
  return databaseUrl(cluster, owner, database)
}
