import { EventEmitter } from 'node:events'
import { MikroORM } from '@mikro-orm/postgresql'
import { sharpImaging } from '#server/adapters/imaging/sharp'
import { stripePayments } from '#server/adapters/payments/stripe'
import type { Storage } from '#server/adapters/storage/storage'
import { dbConfig } from '#server/db/config'
import type { App } from '#server/utils/app'
import type { Config } from '#server/utils/config'
import { createStreamCount } from '#server/utils/stream-count'

/** The application as the story needs it: real database, storage and pictures; a clock that stands where the story is. */
export interface StoryApp {
  app: App
  /** Moves the school's clock. */
  standAt: (at: Date) => void
  close: () => Promise<void>
}

/**
 * @param given an ORM that is open already stays open; a storage of another kind may be given by a test
 */
export async function openStoryApp(config: Config, given: { orm?: MikroORM, storage: Storage }): Promise<StoryApp> {
  const orm = given.orm ?? await MikroORM.init(dbConfig(config.databaseUrl))
  let now = new Date()
  // Work that follows a step is done by the player at once, and messages of the past are not sent, so nothing is queued.
  const boss = Object.assign(new EventEmitter(), { send: async () => null })
  const nothing = () => () => undefined
  const app: App = {
    config,
    orm,
    boss: boss as unknown as App['boss'],
    storage: given.storage,
    mail: { send: async () => ({ state: 'dead', problem: 'the story sends nothing' }), close: () => undefined },
    // What was paid in the past is plain rows: nothing is asked of it.
    payments: stripePayments(config.pay),
    clock: { now: () => now, schoolNow: () => now },
    imaging: sharpImaging(),
    signals: { onSubmission: nothing, onWork: nothing, close: async () => undefined },
    streams: createStreamCount(1),
    close: async () => undefined,
  }
  return {
    app,
    standAt: at => void (now = at),
    close: async () => {
      if (!given.orm) await orm.close(true)
    },
  }
}
