import pg from 'pg'
import { inject } from 'vitest'
import { sibling } from './template-database'

export type FreshDatabase = { url: string, drop: () => Promise<void> }

/** A database of this test's own, with migrations applied and nobody in it. */
export async function freshDatabase(): Promise<FreshDatabase> {
  const server = inject('databaseUrl')
  const name = `test_${process.pid}_${crypto.randomUUID().slice(0, 8)}`
  const run = async (sql: string) => {
    const client = new pg.Client({ connectionString: server })
    await client.connect()
    try {
      await client.query(sql)
    }
    finally {
      await client.end()
    }
  }
  await run(`CREATE DATABASE ${name} TEMPLATE ${inject('templateName')} STRATEGY file_copy`)
  return { url: sibling(server, name), drop: () => run(`DROP DATABASE IF EXISTS ${name} WITH (FORCE)`) }
}
