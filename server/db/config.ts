import { defineConfig } from '@mikro-orm/postgresql'
import { Migrator } from '@mikro-orm/migrations'
import { SeedManager } from '@mikro-orm/seeder'
import { entities } from './entities/all'

/** ORM configuration for one database; the command line, the server, jobs and tests all start here. */
export function dbConfig(clientUrl: string | undefined) {
  return defineConfig({
    clientUrl,
    entities,
    extensions: [Migrator, SeedManager],
    discovery: { disableDynamicFileAccess: true },
    metadataCache: { enabled: false },
    allowGlobalContext: false,
    // An id is there as soon as its row is made: cookies, keys and audit subjects name rows before they are written.
    processOnCreateHooksEarly: true,
    forceUtcTimezone: true,
    pool: { min: 0, max: 12 },
    schemaGenerator: { ignoreSchema: ['pgboss'] },
    migrations: { path: './server/db/migrations', glob: 'Migration*.{ts,js}', snapshotName: '.snapshot-app', emit: 'ts' },
    seeder: { path: './server/db/seeders', defaultSeeder: 'DemoSeeder' },
  })
}
