import { MikroORM } from '@mikro-orm/postgresql'
import pg from 'pg'
import { afterAll, beforeAll, expect, inject, it } from 'vitest'
import { dbConfig } from '#server/db/config'
import { migrations } from '#server/db/migrations/index'
import { sibling } from '../template-database'

/** A school that was there before lessons were documents. */
let url: string
let client: pg.Client
const name = `test_${process.pid}_older`
const server = () => new pg.Client({ connectionString: inject('databaseUrl') })

async function migrate(to?: string): Promise<void> {
  const base = dbConfig(url)
  const orm = await MikroORM.init({ ...base, migrations: { ...base.migrations, migrationsList: migrations, snapshot: false, silent: true } })
  await orm.migrator.up(to === undefined ? undefined : { to })
  await orm.close(true)
}

beforeAll(async () => {
  const admin = server()
  await admin.connect()
  await admin.query(`CREATE DATABASE ${name}`)
  await admin.end()
  url = sibling(inject('databaseUrl'), name)
  await migrate('Migration20260105000100_guards')
  client = new pg.Client({ connectionString: url })
  await client.connect()
  await client.query(`insert into lesson (id, number, slug, title, module, ops, created_at) values
    ('00000000-0000-4000-8000-000000000001', 1, 'receiving', 'Receiving a core', 'Numbers', '{10}', now()),
    ('00000000-0000-4000-8000-000000000002', 4, 'layout', 'Layout', 'Lines', '{40}', now())`)
  await client.query(`insert into lesson_version (id, lesson_id, version, markdown, published_at) values
    ('00000000-0000-4000-8000-000000000003', '00000000-0000-4000-8000-000000000001', 1, E'# Receiving\\n\\nName on the wrist first.', now())`)
  await migrate()
})
afterAll(async () => {
  await client?.end()
  const admin = server()
  await admin.connect()
  await admin.query(`DROP DATABASE IF EXISTS ${name} WITH (FORCE)`)
  await admin.end()
})

it('keeps what an older lesson said, word for word, as paragraphs of a document', async () => {
  const { rows } = await client.query<{ title: string, document: unknown }>('select title, document from lesson_version')
  const paragraph = (text: string) => ({ type: 'paragraph', content: [{ type: 'text', text }] })
  expect(rows).toEqual([{ title: 'Receiving a core', document: { type: 'doc', content: [paragraph('# Receiving'), paragraph('Name on the wrist first.')] } }])
})

it('makes a module of every word lessons called theirs, in the order of the lessons', async () => {
  const { rows } = await client.query('select m.number, m.title, l.slug from lesson l join course_module m on m.id = l.module_id order by m.number')
  expect(rows).toEqual([{ number: 1, title: 'Numbers', slug: 'receiving' }, { number: 2, title: 'Lines', slug: 'layout' }])
})

it('goes on refusing changes to a published version', async () => {
  await expect(client.query(`update lesson_version set title = 'other'`)).rejects.toThrow(/never changed/)
})
