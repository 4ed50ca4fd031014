import type { EntityManager } from '@mikro-orm/postgresql'
import { SignInFailure } from '#server/db/entities/SignInFailure'
import { Refusal } from '#server/utils/refusal'

const windowMs = 15 * 60_000
const allowed = 10

function subjects(email: string, address: string): string[] {
  return [`account:${email.trim().toLowerCase().slice(0, 254)}`, `address:${address}`]
}

/** @throws {Refusal} too_many_tries with retryAfter, once ten failures stand for the account or the address */
export async function refuseTooManyTries(em: EntityManager, email: string, address: string, now: Date): Promise<void> {
  for (const subject of subjects(email, address)) {
    const recent = await em.find(SignInFailure, { subject, at: { $gt: new Date(now.getTime() - windowMs) } }, { orderBy: { at: 'desc' }, limit: allowed })
    const oldest = recent[allowed - 1]
    if (oldest) throw new Refusal('too_many_tries', undefined, { retryAfter: Math.max(1, Math.ceil((oldest.at.getTime() + windowMs - now.getTime()) / 1000)) })
  }
}

/** Counts a failure, and forgets those that no longer matter. */
export async function countFailure(em: EntityManager, email: string, address: string, now: Date): Promise<void> {
  await em.nativeDelete(SignInFailure, { at: { $lt: new Date(now.getTime() - windowMs) } })
  for (const subject of subjects(email, address)) em.persist(em.create(SignInFailure, { subject, at: now }))
  await em.flush()
}
