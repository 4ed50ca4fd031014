import pg from 'pg'
import { afterAll, beforeAll, expect, it } from 'vitest'
import { openHarness, type Harness } from './harness'

let harness: Harness
beforeAll(async () => {
  harness = await openHarness()
})
afterAll(() => harness?.close())

async function ask(sql: string): Promise<unknown[]> {
  const client = new pg.Client({ connectionString: harness.databaseUrl })
  await client.connect()
  try {
    return (await client.query(sql)).rows
  }
  finally {
    await client.end()
  }
}

it('gives each test file a database of its own with every migration applied and nobody in it', async () => {
  expect(await harness.app.orm.migrator.getPendingMigrations()).toEqual([])
  expect(await ask('select count(*)::int as n from "app_user"')).toEqual([{ n: 0 }])
})

it('connects as a role that is not the superuser, so that a refused change stays refused', async () => {
  expect(await ask('select rolsuper from pg_roles where rolname = current_user')).toEqual([{ rolsuper: false }])
})

it('reaches storage', async () => {
  expect(await harness.app.storage.ready()).toBe(true)
})
