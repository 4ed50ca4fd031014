import { MikroORM } from '@mikro-orm/postgresql'
import { createClock } from '../adapters/clock/clock'
import { sharpImaging } from '../adapters/imaging/sharp'
import { smtpMail } from '../adapters/mail/smtp'
import { stripePayments } from '../adapters/payments/stripe'
import { s3Storage } from '../adapters/storage/s3'
import { dbConfig } from '../db/config'
import { SchoolSetting } from '../db/entities/SchoolSetting'
import { migrations } from '../db/migrations/index'
import type { App } from './app'
import type { Config } from './config'
import { withDatabaseLock } from './database-lock'
import { startBoss } from './boss'
import { listen } from './signals'
import { createStreamCount } from './stream-count'

/** Connects everything. @throws when the database cannot be had: the process should end and be started again. */
export async function startApp(config: Config): Promise<App> {
  const base = dbConfig(config.databaseUrl)
  const orm = await MikroORM.init({ ...base, migrations: { ...base.migrations, migrationsList: migrations, snapshot: false } })
  if (config.migrateOnStart) await withDatabaseLock(config.databaseUrl, () => orm.migrator.up())
  const boss = await startBoss(config.databaseUrl)
  const demo = await orm.em.fork().findOne(SchoolSetting, { name: 'demo-clock' })
  const signals = listen(config.databaseUrl)
  return {
    config,
    orm,
    boss,
    storage: s3Storage(config.storage),
    mail: smtpMail(config.mail),
    payments: stripePayments(config.pay),
    clock: createClock(demo ? demo.value as { demoNow: string, seededAt: string } : null),
    imaging: sharpImaging(),
    signals,
    streams: createStreamCount(4),
    async close() {
      // Order matters: a running job still needs the ORM.
      await boss.stop({ graceful: true, wait: true, timeout: 25_000 })
      await signals.close()
      await orm.close(true)
    },
  }
}
