import type { EntityManager } from '@mikro-orm/postgresql'
import { Submission } from '#server/db/entities/Submission'
import { User } from '#server/db/entities/User'
import { findHead } from '#server/services/heads/find-head'
import { loadRoute } from '#server/services/heads/route-state'
import type { Actor } from '#server/utils/actor'
import type { App } from '#server/utils/app'
import { recordEvent } from '#server/utils/record-event'
import { Refusal } from '#server/utils/refusal'
import { portsOfPart } from '#shared/domain/rubric/covers'
import type { Side } from '#shared/domain/units/port'

/**
 * Makes the draft of the part of a stage that is due, or gives the one there is.
 *
 * @param wish cylinder and side of a first article, where the student does not begin at the usual one
 * @throws {Refusal} head_not_found, stage_not_found, stage_not_open, clearance_missing, head_stopped, nothing_due or port_not_on_head
 */
export async function startDraft(em: EntityManager, app: App, actor: Actor, headId: string, op: number, wish: { cylinder?: number, side?: Side }): Promise<{ submission: Submission, made: boolean }> {
  return em.transactional(async (tx) => {
    // The head is locked, so that two tabs never make two drafts.
    const head = await findHead(tx, app, actor, headId, { purpose: 'add', lock: true })
    const stage = head.rubric.$.rubric.stages.find(one => one.op === op)
    const { stages } = await loadRoute(tx, app, head)
    const state = stages.find(one => one.op === op)
    if (!stage || !state) throw new Refusal('stage_not_found')
    if (state.shutBy) throw new Refusal(state.shutBy, state.why ?? undefined)
    if (state.due === null) throw new Refusal('nothing_due')
    if (state.state === 'held') throw new Refusal('stage_not_open', state.why ?? undefined)
    const { part, point, try: tryNumber, submission: there } = state.due
    if (there) return { submission: await tx.findOneOrFail(Submission, there.id), made: false }

    const casting = head.casting.$.card
    if (wish.cylinder !== undefined && wish.cylinder > casting.cylinders) throw new Refusal('port_not_on_head')
    const usual = portsOfPart(stage, part, casting, part === 'first' ? wish.cylinder ?? head.firstCylinder : head.firstCylinder)
    // A first article of one port may be of the other side; one of a whole cylinder is of both.
    const ports = part === 'first' && usual.length === 1 && wish.side ? usual.map(port => ({ ...port, side: wish.side as Side })) : usual
    const submission = tx.create(Submission, {
      head, op, part, point, tryNumber, ports, startedBy: tx.getReference(User, actor.id), createdAt: app.clock.schoolNow(),
      askedAt: null, scoredVersion: null, scoredAt: null, decidedAt: null, decision: null, score: null, word: null,
    })
    tx.persist(submission)
    if (head.state === 'received') head.state = 'working'
    recordEvent(tx, { actor: actor.id, action: 'submission.start', subject: `submission:${submission.id}`, detail: { head: head.id, op, part, point, try: tryNumber } })
    await tx.flush()
    return { submission, made: true }
  })
}
