import type { EntityManager } from '@mikro-orm/postgresql'
import type PgBoss from 'pg-boss'
import type { JobData, QueueName } from './queues'
import { signal } from './signals'

/** Puts work in the queue inside the caller's transaction: it is there exactly when the change that needs it is. */
export async function enqueue<Name extends QueueName>(app: { boss: PgBoss }, em: EntityManager, name: Name, data: JobData[Name], options: { startAfter?: number, singletonKey?: string } = {}): Promise<void> {
  const transaction = em.getTransactionContext()
  if (!transaction) throw new Error(`enqueue(${name}) outside a transaction`)
  await app.boss.send(name, data, {
    ...options,
    db: {
      async executeSql(text: string, values: unknown[]) {
        const client = await (transaction as unknown as { client: { acquireConnection: () => Promise<{ query: (text: string, values: unknown[]) => Promise<{ rows: unknown[] }> }> } }).client.acquireConnection()
        return client.query(text, values)
      },
    } as PgBoss.Db,
  })
  // Heard at commit: workers look at once instead of at their next turn.
  await signal(em, { kind: 'work', id: name })
}
