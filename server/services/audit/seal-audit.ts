import type { EntityManager } from '@mikro-orm/postgresql'
import { AuditSeal } from '#server/db/entities/AuditSeal'
import { beforeFirst, eventColumns, linkHash, type EventRow } from './link-hash'

/** One sealer at a time, whatever the number of workers. Another number than the migrations' lock. */
const sealerLock = 7_240_192

/** Events linked in one transaction: a kill loses at most this much work, and no more than work. */
const atOnce = 1000

/**
 * Numbers every committed event that has no number yet, chains each to the one before, and seals the chain's head.
 *
 * A row committed late is numbered when it is seen, after rows that happened later: the number says in which order the record
 * was sealed, `at` says when a thing happened. Each batch is one transaction under an advisory lock, so a sealer killed at any
 * moment leaves either all of a batch or none of it, and a second one waits.
 *
 * @param reason "minute", or the release that asked for it. A minute in which nothing happened is not sealed again.
 * @returns how many events were linked
 */
export async function sealAudit(em: EntityManager, reason: string): Promise<number> {
  let linked = 0
  for (;;) {
    const batch = await em.fork().transactional(tx => linkBatch(tx, reason))
    linked += batch
    if (batch < atOnce) return linked
  }
}

async function linkBatch(tx: EntityManager, reason: string): Promise<number> {
  const connection = tx.getConnection()
  const context = tx.getTransactionContext()
  await connection.execute('select pg_advisory_xact_lock(?)', [sealerLock], 'run', context)
  const [last] = await connection.execute<{ number: number, hash: string }[]>('select number, hash from audit_link order by number desc limit 1', [], 'all', context)
  const events = await connection.execute<EventRow[]>(
    `select ${eventColumns} from audit_event e where not exists (select 1 from audit_link l where l.event_id = e.id) order by e.at, e.id limit ?`, [atOnce], 'all', context)

  let number = last?.number ?? 0
  let hash = last?.hash ?? beforeFirst
  const rows = events.map((event) => {
    number += 1
    hash = linkHash(hash, number, event)
    return [number, event.id, hash] as const
  })
  const now = new Date()
  if (rows.length > 0) {
    const values = rows.map(() => '(?, ?, ?, ?)').join(', ')
    await connection.execute(`insert into audit_link (number, event_id, hash, linked_at) values ${values}`, rows.flatMap(row => [...row, now]), 'run', context)
  }
  const sealAnyway = reason !== 'minute' && events.length < atOnce && number > 0
  if (rows.length > 0 || sealAnyway) {
    tx.persist(tx.create(AuditSeal, { number, hash, at: now, reason: reason.slice(0, 120) }))
    await tx.flush()
  }
  return events.length
}
