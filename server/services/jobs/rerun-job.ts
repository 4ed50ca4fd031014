import type { EntityManager } from '@mikro-orm/postgresql'
import { Mail } from '#server/db/entities/Mail'
import type { Actor } from '#server/utils/actor'
import type { App } from '#server/utils/app'
import { enqueue } from '#server/utils/enqueue'
import { queues, type JobData, type QueueName } from '#server/utils/queues'
import { recordEvent } from '#server/utils/record-event'
import { Refusal } from '#server/utils/refusal'

/**
 * Puts stuck work into the queue again, as new work with the same ids, and takes the stuck row away. A handler may run twice without
 * a second effect, so a second press does no harm. A message the mail server called dead goes by its own id.
 *
 * @throws {Refusal} job_not_found when it is not stuck
 */
export async function rerunJob(em: EntityManager, app: App, actor: Actor, id: string): Promise<void> {
  await em.transactional(async (tx) => {
    const run = <Row>(sql: string) => tx.getConnection().execute<Row[]>(sql, [id], 'all', tx.getTransactionContext())
    if (await tx.nativeUpdate(Mail, { id, state: 'dead' }, { state: 'waiting' })) return again(tx, app, actor, id, 'send-mail', { mailId: id })
    const [live] = await run<{ name: string, data: unknown }>(`delete from pgboss.job where id = ? and state in ('failed', 'retry') returning name, data`)
    const [kept] = live ? [live] : await run<{ name: string, data: unknown }>(`delete from pgboss.archive where id = ? and state = 'failed' returning name, data`)
    if (!kept || !(kept.name in queues)) throw new Refusal('job_not_found')
    await again(tx, app, actor, id, kept.name as QueueName, kept.data as JobData[QueueName])
  })
}

async function again(tx: EntityManager, app: App, actor: Actor, id: string, name: QueueName, data: JobData[QueueName]): Promise<void> {
  await enqueue(app, tx, name, data, { singletonKey: `again:${id}` })
  recordEvent(tx, { actor: actor.id, action: 'job-run-again', subject: `job:${id}`, detail: { kind: name } })
}
