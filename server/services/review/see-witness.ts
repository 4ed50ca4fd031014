import { LockMode } from '@mikro-orm/core'
import type { EntityManager, FilterQuery } from '@mikro-orm/postgresql'
import { WitnessCall } from '#server/db/entities/PointRelease'
import { PracticeHead } from '#server/db/entities/PracticeHead'
import { User } from '#server/db/entities/User'
import { hasRole, type Actor } from '#server/utils/actor'
import type { App } from '#server/utils/app'
import { recordEvent } from '#server/utils/record-event'
import { Refusal } from '#server/utils/refusal'
import { findPoint } from './point-words'
import { staffLinks } from './staff-links'

/**
 * Says that a witness point was seen: by somebody who may sign it in the head's cohort, or by the safety officer where the rubric
 * names that post. Said twice, the first stands.
 *
 * @throws {Refusal} head_not_found, point_not_due when the route has no such witness point, own_work, point_not_yours, witness_not_told
 */
export async function seeWitness(em: EntityManager, app: App, actor: Actor, headId: string, code: string): Promise<{ point: string, seenAt: string }> {
  return em.transactional(async (tx) => {
    const now = app.clock.schoolNow()
    const links = await staffLinks(tx, actor, now)
    const safety = hasRole(actor, 'safety')
    const where: FilterQuery<PracticeHead> = safety ? { id: headId } : { id: headId, cohort: { $in: [...links.keys()] } }
    const head = await tx.findOne(PracticeHead, where, { populate: ['rubric'] })
    if (!head) throw new Refusal('head_not_found')
    const point = findPoint(head.rubric.$.rubric, code)?.point
    if (point?.kind !== 'witness') throw new Refusal('point_not_due', 'This route has no such witness point.')
    if (head.student.id === actor.id) throw new Refusal('own_work')
    const may = (safety && point.signers.includes('safety')) || (links.get(head.cohort?.id ?? '')?.has(code) ?? false)
    if (!may) throw new Refusal('point_not_yours')
    const call = await tx.findOne(WitnessCall, { head: head.id, point: code }, { lockMode: LockMode.PESSIMISTIC_WRITE })
    if (!call) throw new Refusal('witness_not_told')
    if (!call.seenAt) {
      Object.assign(call, { seenBy: tx.getReference(User, actor.id), seenAt: now })
      recordEvent(tx, { actor: actor.id, action: 'witness-seen', subject: `head:${head.id}`, detail: { point: code } })
    }
    return { point: code, seenAt: (call.seenAt ?? now).toISOString() }
  })
}
