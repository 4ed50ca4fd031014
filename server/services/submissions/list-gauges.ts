import type { EntityManager } from '@mikro-orm/postgresql'
import type { Actor } from '#server/utils/actor'
import type { App } from '#server/utils/app'
import { Refusal } from '#server/utils/refusal'
import type { GaugeView } from '#shared/contract/views'
import { stageAsDue } from '#shared/domain/rubric/stage-as-due'
import { findSubmission } from './find-submission'
import { gatherEvidence } from './gather-evidence'

/**
 * What the reading pad gauges by while figures are typed: the stage's measured criteria without sentences, the casting, and the readings
 * that stand.
 *
 * @throws {Refusal} submission_not_found, stage_not_found
 */
export async function listGauges(em: EntityManager, app: App, actor: Actor, id: string): Promise<GaugeView> {
  const submission = await findSubmission(em, app, actor, id)
  const head = submission.head.$
  const rubric = head.rubric.$.rubric
  if (!rubric.stages.some(one => one.op === submission.op)) throw new Refusal('stage_not_found')
  const { evidence } = await gatherEvidence(em, submission)
  const stage = stageAsDue(rubric, submission.op)
  return {
    stage: { ...stage, criteria: stage.criteria.filter(criterion => criterion.kind !== 'judged' && criterion.kind !== 'derived from flow').map(criterion => ({ ...criterion, feedback: {}, examples: [], evidence: '', basis: '' })) },
    casting: head.casting.$.card,
    readings: evidence.readings,
  }
}
