import type { EntityManager, FilterQuery } from '@mikro-orm/postgresql'
import { HeadStop } from '#server/db/entities/PointRelease'
import { PracticeHead } from '#server/db/entities/PracticeHead'
import { User } from '#server/db/entities/User'
import { firstName } from '#server/services/mail/first-name'
import { stopWork } from '#server/services/mail/templates/stop-work'
import { stopped } from '#server/services/mail/templates/stopped'
import { writeMail } from '#server/services/mail/write-mail'
import { hasRole, type Actor } from '#server/utils/actor'
import type { App } from '#server/utils/app'
import { recordEvent } from '#server/utils/record-event'
import { Refusal } from '#server/utils/refusal'
import type { StopInput } from '#shared/contract/inputs'
import { longDate, timeOfDay } from '#shared/contract/school-time'
import { staffLinks } from './staff-links'

/**
 * Stops work on a head at once: an instructor of its cohort, or the safety officer on any.
 *
 * @throws {Refusal} head_not_found
 */
export async function stopHead(em: EntityManager, app: App, actor: Actor, headId: string, input: StopInput): Promise<{ id: string, where: string, reason: string, at: string }> {
  return em.transactional(async (tx) => {
    const now = app.clock.schoolNow()
    const safety = hasRole(actor, 'safety')
    const where: FilterQuery<PracticeHead> = safety ? { id: headId } : { id: headId, cohort: { $in: [...(await staffLinks(tx, actor, now)).keys()] } }
    const head = await tx.findOne(PracticeHead, where, { populate: ['student'] })
    if (!head) throw new Refusal('head_not_found')
    const stop = tx.create(HeadStop, { head, by: tx.getReference(User, actor.id), at: now, criterion: null, point: null, where: input.where, reason: input.reason, liftedBy: null, liftedAt: null, liftReason: null })
    tx.persist(stop)
    recordEvent(tx, { actor: actor.id, action: 'head-stopped', subject: `head:${head.id}`, detail: { stop: stop.id, bySafety: safety } })
    await tx.flush()
    const student = head.student.$
    const url = `${app.config.publicUrl}/heads/${head.id}`
    await writeMail(tx, app, {
      key: `head-stopped:${stop.id}`,
      template: safety ? 'stop-work' : 'stopped',
      to: student,
      letter: safety
        ? stopWork({ head: head.number, where: input.where, officer: actor.name, at: `${timeOfDay(now.toISOString())} on ${longDate(now.toISOString())}`, reason: input.reason, url })
        : stopped({ first: firstName(student.name), head: head.number, where: input.where, wallOrLeak: false, measured: null, reason: input.reason, instructor: actor.name, nothingElse: false, url }),
    })
    return { id: stop.id, where: stop.where, reason: stop.reason, at: stop.at.toISOString() }
  })
}
