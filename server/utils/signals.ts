import { EventEmitter } from 'node:events'
import pg from 'pg'
import type { EntityManager } from '@mikro-orm/postgresql'

const channel = 'witness_mark'

/**
 * Something changed that a page may be following, or work was put in the queue `id` names. Carries an id only; whoever hears it
 * reads the rest fresh.
 */
export interface Signal { kind: 'submission' | 'work', id: string }

/** Tells every process, once this transaction commits. */
export async function signal(em: EntityManager, what: Signal): Promise<void> {
  await em.getConnection().execute('select pg_notify(?, ?)', [channel, JSON.stringify(what)], 'run', em.getTransactionContext())
}

export interface Signals {
  onSubmission: (id: string, heard: () => void) => () => void
  /** Work was put in a queue, by whichever process. */
  onWork: (queue: string, heard: () => void) => () => void
  close: () => Promise<void>
}

/** Listens on one connection of its own and hands signals to whoever follows a submission. Reconnects by itself. */
export function listen(databaseUrl: string): Signals {
  const emitter = new EventEmitter()
  emitter.setMaxListeners(0)
  let client: pg.Client | undefined
  let closed = false

  async function connect() {
    if (closed) return
    client = new pg.Client({ connectionString: databaseUrl })
    client.on('notification', (message) => {
      const what = JSON.parse(message.payload ?? '{}') as Signal
      emitter.emit(`${what.kind}:${what.id}`)
    })
    client.on('error', () => again())
    client.on('end', () => again())
    await client.connect()
    await client.query(`listen ${channel}`)
  }
  let waiting = false
  function again() {
    if (closed || waiting) return
    waiting = true
    setTimeout(() => {
      waiting = false
      connect().catch(again)
    }, 500)
  }
  connect().catch(again)

  const on = (name: string, heard: () => void) => {
    emitter.on(name, heard)
    return () => emitter.off(name, heard)
  }
  return {
    onSubmission: (id, heard) => on(`submission:${id}`, heard),
    onWork: (queue, heard) => on(`work:${queue}`, heard),
    async close() {
      closed = true
      await client?.end().catch(() => undefined)
    },
  }
}
