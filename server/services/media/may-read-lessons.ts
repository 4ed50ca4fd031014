import type { EntityManager } from '@mikro-orm/postgresql'
import { BenchPlace } from '#server/db/entities/BenchPlace'
import { hasRole, type Actor } from '#server/utils/actor'
import type { App } from '#server/utils/app'
import { Refusal } from '#server/utils/refusal'

/** Staff read lessons; students while their place stands, and after it while their access runs. @throws {Refusal} not_found */
export async function mayReadLessons(em: EntityManager, app: Pick<App, 'clock'>, actor: Actor): Promise<void> {
  if (hasRole(actor, 'instructor', 'admin', 'safety')) return
  const standing = { state: { $in: ['deposit-paid', 'confirmed', 'here'] as const } }
  const running = { state: 'finished' as const, accessUntil: { $gt: app.clock.schoolNow() } }
  if (await em.count(BenchPlace, { person: actor.id, $or: [standing, running] }) === 0) throw new Refusal('media_not_found')
}
