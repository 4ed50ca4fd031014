import type { EntityManager } from '@mikro-orm/postgresql'
import { IdempotencyKey } from '#server/db/entities/IdempotencyKey'

/** A phone keeps what it could not send for weeks; nobody sends the same call again after this. */
const keptMs = 60 * 24 * 3_600_000

/** Forgets first answers to calls nobody repeats any more. @returns how many */
export function forgetAnswers(em: EntityManager, now: Date): Promise<number> {
  return em.nativeDelete(IdempotencyKey, { at: { $lt: new Date(now.getTime() - keptMs) } })
}
