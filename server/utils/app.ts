import type { MikroORM } from '@mikro-orm/postgresql'
import type PgBoss from 'pg-boss'
import type { Clock } from '../adapters/clock/clock'
import type { Imaging } from '../adapters/imaging/imaging'
import type { MailSender } from '../adapters/mail/mail'
import type { Payments } from '../adapters/payments/payments'
import type { Storage } from '../adapters/storage/storage'
import type { Config } from './config'
import { readConfig } from './config'
import type { Signals } from './signals'
import { startApp } from './start-app'
import type { StreamCount } from './stream-count'

/** Everything a use case may need from outside itself. One a process; nothing in it remembers a request. */
export interface App {
  config: Config
  orm: MikroORM
  boss: PgBoss
  storage: Storage
  mail: MailSender
  payments: Payments
  clock: Clock
  imaging: Imaging
  signals: Signals
  streams: StreamCount
  close: () => Promise<void>
}

let started: Promise<App> | undefined

/** The process's one app, started at the first call. Nitro does not await plugins, so every request awaits this. */
export function getApp(): Promise<App> {
  return started ??= startApp(readConfig(process.env))
}

/** Serves this app instead of one made from the environment: for whoever has started one already, as tests have. */
export function provideApp(app: App): void {
  started = Promise.resolve(app)
}
