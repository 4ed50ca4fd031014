import { LockMode } from '@mikro-orm/core'
import type { EntityManager, FilterQuery } from '@mikro-orm/postgresql'
import { HeadStop } from '#server/db/entities/PointRelease'
import { User } from '#server/db/entities/User'
import { hasRole, type Actor } from '#server/utils/actor'
import type { App } from '#server/utils/app'
import { recordEvent } from '#server/utils/record-event'
import { Refusal } from '#server/utils/refusal'
import type { LiftInput } from '#shared/contract/inputs'
import { staffLinks } from './staff-links'

/**
 * Lifts a stop, with a reason: an instructor of the head's cohort, never on own work. What the safety officer stopped, only the
 * safety officer starts again.
 *
 * @throws {Refusal} stop_not_found, own_work, stop_of_safety, stop_lifted
 */
export async function liftStop(em: EntityManager, app: App, actor: Actor, stopId: string, input: LiftInput): Promise<{ id: string, liftedAt: string }> {
  return em.transactional(async (tx) => {
    const now = app.clock.schoolNow()
    const safety = hasRole(actor, 'safety')
    const taught = [...(await staffLinks(tx, actor, now)).keys()]
    const where: FilterQuery<HeadStop> = safety ? { id: stopId } : { id: stopId, head: { cohort: { $in: taught } } }
    const found = await tx.findOne(HeadStop, where, { populate: ['by', 'head'] })
    if (!found) throw new Refusal('stop_not_found')
    if (found.head.$.student.id === actor.id) throw new Refusal('own_work')
    if (found.by.$.roles.includes('safety')) {
      if (!safety) throw new Refusal('stop_of_safety')
    }
    else if (!taught.includes(found.head.$.cohort?.id ?? '')) throw new Refusal('stop_not_found')
    const stop = await tx.findOneOrFail(HeadStop, { id: stopId }, { lockMode: LockMode.PESSIMISTIC_WRITE, refresh: true })
    if (stop.liftedAt) throw new Refusal('stop_lifted')
    Object.assign(stop, { liftedBy: tx.getReference(User, actor.id), liftedAt: now, liftReason: input.reason })
    recordEvent(tx, { actor: actor.id, action: 'stop-lifted', subject: `head:${stop.head.id}`, detail: { stop: stop.id } })
    return { id: stop.id, liftedAt: now.toISOString() }
  })
}
