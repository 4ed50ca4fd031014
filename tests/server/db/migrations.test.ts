import { readdirSync } from 'node:fs'
import { join } from 'node:path'
import { MikroORM } from '@mikro-orm/postgresql'
import { afterAll, beforeAll, expect, it } from 'vitest'
import { dbConfig } from '#server/db/config'
import { migrations } from '#server/db/migrations/index'
import { projectRoot } from '../../../scripts/lib/project-root'
import { freshDatabase } from '../fresh-database'

let database: Awaited<ReturnType<typeof freshDatabase>>
let orm: MikroORM
beforeAll(async () => {
  database = await freshDatabase()
  // As the command line has it: by the snapshot beside the migrations.
  orm = await MikroORM.init({ ...dbConfig(database.url), baseDir: projectRoot })
})
afterAll(async () => {
  await orm?.close(true)
  await database?.drop()
})

it('has a migration for every change of the entities (npm run orm -- migration:create)', async () => {
  expect(await orm.migrator.checkMigrationNeeded()).toBe(false)
})

it('makes a database the entities want nothing changed in', async () => {
  expect(await orm.schema.getUpdateSchemaSQL({ wrap: false, safe: false })).toBe('')
})

it('runs every migration of the folder, in order', () => {
  const files = readdirSync(join(projectRoot, 'server/db/migrations')).filter(name => /^Migration.*\.ts$/.test(name)).map(name => name.slice(0, -3)).sort()
  expect(migrations.map(one => one.name)).toEqual(files)
})
