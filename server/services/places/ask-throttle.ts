import type { EntityManager } from '@mikro-orm/postgresql'
import { AskTry } from '#server/db/entities/AskTry'
import { Refusal } from '#server/utils/refusal'

const windowMs = 3_600_000

/**
 * Counts an ask, by e-mail and by network address, whether or not either is known. Two at once wait for each other, so that
 * nobody gets more by asking faster.
 *
 * @throws {Refusal} asks_too_many with retryAfter, after three for one e-mail or ten from one address within an hour
 */
export async function countAsk(em: EntityManager, email: string, address: string, now: Date): Promise<void> {
  const since = new Date(now.getTime() - windowMs)
  await em.transactional(async (tx) => {
    // The address first, always: in one order nobody waits in a ring.
    for (const [subject, allowed] of [[`address:${address}`, 10], [`email:${email}`, 3]] as const) {
      await tx.getConnection().execute('select pg_advisory_xact_lock(hashtextextended(?, 0))', [`ask:${subject}`], 'run', tx.getTransactionContext())
      const recent = await tx.find(AskTry, { subject, at: { $gt: since } }, { orderBy: { at: 'desc' }, limit: allowed })
      const oldest = recent[allowed - 1]
      if (oldest) throw new Refusal('asks_too_many', undefined, { retryAfter: Math.max(1, Math.ceil((oldest.at.getTime() + windowMs - now.getTime()) / 1000)) })
      tx.persist(tx.create(AskTry, { subject, at: now }))
    }
  })
}

/** Forgets asks that no longer count. */
export async function forgetAsks(em: EntityManager, now: Date): Promise<void> {
  await em.nativeDelete(AskTry, { at: { $lt: new Date(now.getTime() - windowMs) } })
}
