import pg from 'pg'
import type { Cluster } from './postgres/cluster'
import { databaseUrl, ensureDatabase } from './postgres/ensure-database'
import { Problem } from './problem'
import { projectRoot } from './project-root'
import { run } from './run'

export type School = {
  cluster: Cluster
  owner: { name: string, password: string }
  /** Name of the database. */
  database: string
  /** What the seed needs: storage for the story's photos, and everything else the application reads. */
  env: Readonly<Record<string, string | undefined>>
  /** The instant the story is played up to; the demo's own when left out. */
  until?: string
}

/**
 * The demo school in a database of that name, seeded once.
 *
 * It is filled under another name and renamed when it is whole, so a kill half-way leaves no half school; one that has people
 * in it is never touched.
 *
 * @throws {Problem} when the seed fails, with what it said
 */
export async function ensureSchool({ cluster, owner, database, env, until }: School, say: (line: string) => void): Promise<string> {
  const url = databaseUrl(cluster, owner, database)
  if (await hasPeople(url)) return url
  say('Seeding the demo school ...')
  const half = `${database}_half`
  await asAdmin(cluster, `DROP DATABASE IF EXISTS "${half}" WITH (FORCE)`)
  const halfUrl = await ensureDatabase(cluster, { ...owner, mayCreateDatabases: !cluster.durable }, half)
  const ran = await run(process.execPath, ['node_modules/tsx/dist/cli.mjs', '--tsconfig', 'scripts/tsconfig.json', 'scripts/seed.ts', ...(until ? ['--until', until] : [])], {
    cwd: projectRoot, env: { ...env, NUXT_DATABASE_URL: halfUrl },
  })
  if (ran.code !== 0) throw new Problem(`The demo school could not be seeded:\n${ran.output.trim().split('\n').slice(-20).join('\n')}`)
  if (!await hasPeople(halfUrl)) throw new Problem('The seed ended well and there is nobody in the school.')
  await asAdmin(cluster, `DROP DATABASE IF EXISTS "${database}" WITH (FORCE)`)
  await asAdmin(cluster, `ALTER DATABASE "${half}" RENAME TO "${database}"`)
  return url
}

/** False also when there is no such database, or no table yet. */
async function hasPeople(url: string): Promise<boolean> {
  const client = new pg.Client({ connectionString: url })
  try {
    await client.connect()
    const { rows } = await client.query<{ there: string | null }>('select to_regclass(\'app_user\') as there')
    if (rows[0]?.there === null) return false
    return ((await client.query('select 1 from app_user limit 1')).rowCount ?? 0) > 0
  }
  catch (thrown) {
    // Codes of PostgreSQL, appendix A: 3D000 no such database, 28000 and 28P01 no such role yet.
    if (['3D000', '28000', '28P01'].includes((thrown as { code?: string }).code ?? '')) return false
    throw thrown
  }
  finally {
    await client.end()
  }
}

async function asAdmin(cluster: Cluster, sql: string): Promise<void> {
  const client = new pg.Client({ connectionString: databaseUrl(cluster, cluster.admin, 'postgres') })
  await client.connect()
  try {
    await client.query(sql)
  }
  finally {
    await client.end()
  }
}
