import type { EntityManager } from '@mikro-orm/postgresql'
import { loadRoute } from '#server/services/heads/route-state'
import type { Actor } from '#server/utils/actor'
import type { App } from '#server/utils/app'
import { Refusal } from '#server/utils/refusal'
import { findSubmission, type FoundSubmission } from './find-submission'

/**
 * The submission, locked, if evidence may be added to it now by this person: the student, or an instructor on the student's behalf.
 * Call it inside the transaction that writes the evidence, and `afterEvidence` at its end.
 *
 * Asked and scored submissions still take evidence (it raises their version); decided ones take none.
 *
 * @throws {Refusal} submission_not_found, submission_decided, stage_not_open, clearance_missing or head_stopped, each with why
 */
export async function openForEvidence(tx: EntityManager, app: App, actor: Actor, submissionId: string): Promise<FoundSubmission> {
  const submission = await findSubmission(tx, app, actor, submissionId, { purpose: 'add', lock: true })
  if (submission.state === 'decided') throw new Refusal('submission_decided')
  const { stages } = await loadRoute(tx, app, submission.head.$)
  const stage = stages.find(one => one.op === submission.op)
  if (!stage) throw new Refusal('stage_not_found')
  if (stage.shutBy) throw new Refusal(stage.shutBy, stage.why ?? undefined)
  return submission
}
