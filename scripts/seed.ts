/**
 * `npm run seed -- --until 2026-03-26T19:40`: fills an empty database with the demo school as its story stands at an instant (by the
 * school's wall clock, unless it ends in Z or an offset). Left out, the demo's own instant.
 *
 * Does nothing, and ends well, where the demo school is there already. Never touches a database with other people in it.
 */
import { MikroORM } from '@mikro-orm/postgresql'
import { s3Storage } from '#server/adapters/storage/s3'
import { dbConfig } from '#server/db/config'
import { migrations } from '#server/db/migrations/index'
import { readConfig } from '#server/utils/config'
import { withDatabaseLock } from '#server/utils/database-lock'
import { Problem } from './lib/problem'
import { refuseOutsideDemo } from './lib/refuse-outside-demo'
import { runCommand } from './lib/run-command'
import { readSettings } from './lib/settings'
import { demoInstant } from './seed/demo-instant'
import { readUntil } from './seed/read-until'
import { seedSchool } from './seed/seed-school'
import { seedEnv } from './seed/seed-env'

await runCommand(async () => {
  refuseOutsideDemo(process.env, readSettings(process.env).host)
  const until = readUntil(process.argv.slice(2), demoInstant)
  const config = readConfig(seedEnv(process.env))
  const began = performance.now()
  const base = dbConfig(config.databaseUrl)
  const orm = await MikroORM.init({ ...base, migrations: { ...base.migrations, migrationsList: migrations, snapshot: false } })
  try {
    await withDatabaseLock(config.databaseUrl, () => orm.migrator.up())
    const storage = s3Storage(config.storage)
    const seeded = await seedSchool({ orm, config, storage, until })
    if (seeded === 'other people') throw new Problem('There are people in this database who are not of the demo school. It is left as it is; seed an empty one.')
    process.stdout.write(seeded === 'seeded' ? `The demo school stands at ${until.toISOString()} (${((performance.now() - began) / 1000).toFixed(1)} s).\n` : 'The demo school is already seeded.\n')
  }
  finally {
    await orm.close(true)
  }
})
