import type { EntityManager } from '@mikro-orm/postgresql'
import { WitnessCall } from '#server/db/entities/PointRelease'
import type { Submission } from '#server/db/entities/Submission'
import { User } from '#server/db/entities/User'
import type { Actor } from '#server/utils/actor'
import type { App } from '#server/utils/app'
import { enqueue } from '#server/utils/enqueue'
import { recordEvent } from '#server/utils/record-event'
import { signal } from '#server/utils/signals'
import { findSubmission } from './find-submission'
import { openForEvidence } from './open-for-evidence'

/** Wait of a witness point whose rubric names none, minutes (handbook 3.4). */
const usualWaitMinutes = 30

/**
 * Asks for the release of a submission's point (or, without one, for its score): the job that scores it goes in with the change.
 * Asked a second time it answers the same and does nothing. Evidence may be missing: the instructor sees that it is.
 *
 * A witness point is told by asking: work may go on when the person named has come or the wait is over.
 *
 * @throws {Refusal} submission_not_found, or for a draft whatever `openForEvidence` refuses
 */
export async function askForRelease(em: EntityManager, app: App, actor: Actor, submissionId: string, note: string | undefined): Promise<Submission> {
  return em.transactional(async (tx) => {
    const there = await findSubmission(tx, app, actor, submissionId, { purpose: 'add', lock: true })
    if (there.state !== 'draft') return there
    const submission = await openForEvidence(tx, app, actor, submissionId)
    const now = app.clock.schoolNow()
    submission.state = 'asked'
    submission.askedAt = now
    if (note !== undefined) submission.note = note
    const point = submission.head.$.rubric.$.rubric.stages.flatMap(stage => stage.points).find(one => one.code === submission.point)
    if (point?.kind === 'witness') {
      const waitUntil = new Date(now.getTime() + (point.waitMinutes ?? usualWaitMinutes) * 60_000)
      const call = await tx.findOne(WitnessCall, { head: submission.head.id, point: point.code })
      const told = { toldBy: tx.getReference(User, actor.id), toldAt: now, waitUntil, seenBy: null, seenAt: null }
      // A second try is told anew: who came to the first did not see it.
      if (call) tx.assign(call, told)
      else tx.persist(tx.create(WitnessCall, { head: submission.head, point: point.code, ...told }))
    }
    recordEvent(tx, { actor: actor.id, action: 'submission.ask', subject: `submission:${submission.id}`, detail: { op: submission.op, part: submission.part, point: submission.point ?? null, try: submission.tryNumber, version: submission.version } })
    await tx.flush()
    await enqueue(app, tx, 'score-submission', { submissionId: submission.id })
    await signal(tx, { kind: 'submission', id: submission.id })
    return submission
  })
}
