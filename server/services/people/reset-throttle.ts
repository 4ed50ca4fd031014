import type { EntityManager } from '@mikro-orm/postgresql'
import { SignInFailure } from '#server/db/entities/SignInFailure'
import { Refusal } from '#server/utils/refusal'

const windowMs = 15 * 60_000

/**
 * Counts a wish for a new password, by e-mail as typed and by address, known or not.
 * The rows stand beside the failed sign-ins and go with them after fifteen minutes.
 *
 * @throws {Refusal} too_many_tries with retryAfter, after five for one e-mail or twenty from one address
 */
export async function countResetWish(em: EntityManager, email: string, address: string, now: Date): Promise<void> {
  const since = new Date(now.getTime() - windowMs)
  await em.nativeDelete(SignInFailure, { at: { $lt: since } })
  for (const [subject, allowed] of [[`reset-account:${email}`, 5], [`reset-address:${address}`, 20]] as const) {
    const recent = await em.find(SignInFailure, { subject, at: { $gt: since } }, { orderBy: { at: 'desc' }, limit: allowed })
    const oldest = recent[allowed - 1]
    if (oldest) throw new Refusal('too_many_tries', 'Links were asked for several times. Look in your mail, or wait a quarter of an hour.', { retryAfter: Math.max(1, Math.ceil((oldest.at.getTime() + windowMs - now.getTime()) / 1000)) })
    em.persist(em.create(SignInFailure, { subject, at: now }))
  }
  await em.flush()
}
