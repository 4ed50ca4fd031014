import { createHash } from 'node:crypto'
import { readdirSync, readFileSync } from 'node:fs'
import { join } from 'node:path'
import { MikroORM } from '@mikro-orm/postgresql'
import pg from 'pg'
import { projectRoot } from '../../scripts/lib/project-root'
import { withFileLock } from '../../scripts/lib/with-file-lock'
import { dbConfig } from '../../server/db/config'
import { migrations } from '../../server/db/migrations/index'
import { startBoss } from '../../server/utils/boss'

/** Address of another database of the same cluster. */
export function sibling(url: string, database: string): string {
  const changed = new URL(url)
  changed.pathname = `/${database}`
  return changed.href
}

/**
 * A database with every migration applied and every queue made, to copy fresh ones from. Kept between runs under the hash of
 * what it is made of, so only a change of the migrations pays for making it.
 *
 * @param url any database of the cluster whose role may create databases
 */
export function ensureTemplate(url: string, dataDir: string): Promise<string> {
  const hash = createHash('sha256')
  const folder = join(projectRoot, 'server/db/migrations')
  for (const name of readdirSync(folder).filter(file => file.endsWith('.ts')).sort()) hash.update(name).update(readFileSync(join(folder, name)))
  for (const file of ['server/utils/queues.ts', 'server/utils/boss.ts']) hash.update(readFileSync(join(projectRoot, file)))
  const name = `template_${hash.digest('hex').slice(0, 16)}`

  return withFileLock(join(dataDir, 'test-template.lock'), async () => {
    const client = new pg.Client({ connectionString: url })
    await client.connect()
    try {
      await sweep(client, name)
      if ((await client.query('select 1 from pg_database where datname = $1', [name])).rowCount) return name
      const half = `half_${process.pid}`
      await client.query(`DROP DATABASE IF EXISTS ${half} WITH (FORCE)`)
      await client.query(`CREATE DATABASE ${half}`)
      const base = dbConfig(sibling(url, half))
      const orm = await MikroORM.init({ ...base, migrations: { ...base.migrations, migrationsList: migrations, snapshot: false } })
      await orm.migrator.up()
      await orm.close(true)
      const boss = await startBoss(sibling(url, half))
      await boss.stop({ graceful: true, wait: true, timeout: 1000 })
      // A database somebody is connected to can be neither renamed nor copied.
      await client.query('select pg_terminate_backend(pid) from pg_stat_activity where datname = $1', [half])
      await client.query(`ALTER DATABASE ${half} RENAME TO ${name}`)
      return name
    }
    finally {
      await client.end()
    }
  })
}

/** What killed runs and older migrations left. A fresh database carries the pid it was made for. */
async function sweep(client: pg.Client, current: string): Promise<void> {
  const { rows } = await client.query<{ datname: string }>('select datname from pg_database')
  for (const { datname } of rows) {
    const pid = Number(/^(?:test|half)_(\d+)/.exec(datname)?.[1] ?? 0)
    const stale = (pid > 0 && !isAlive(pid)) || (datname.startsWith('template_') && datname !== current)
    if (stale) await client.query(`DROP DATABASE IF EXISTS ${datname} WITH (FORCE)`).catch(() => {})
  }
}

function isAlive(pid: number): boolean {
  try {
    process.kill(pid, 0)
    return true
  }
  catch {
    return false
  }
}
