import type { EntityManager } from '@mikro-orm/postgresql'
import { PracticeHead } from '#server/db/entities/PracticeHead'
import { Submission } from '#server/db/entities/Submission'
import { headSummary } from '#server/services/heads/head-summary'
import { loadRoute } from '#server/services/heads/route-state'
import { visibleHeads } from '#server/services/heads/visible-heads'
import { cautionLines } from '#server/services/school/stage-words'
import type { Actor } from '#server/utils/actor'
import type { App } from '#server/utils/app'
import type { SubmissionView } from '#shared/contract/views'
import { pointName } from '#shared/domain/rubric/route-state'
import { evidenceViews } from './evidence-views'
import { findSubmission, type FoundSubmission } from './find-submission'
import { gatherEvidence } from './gather-evidence'
import { submissionCriteria } from './submission-criteria'
import { wantedViews } from './wanted-views'

/**
 * A submission with its evidence, what is still wanted, and the results of its newest version. From the second try on the first
 * try's results come with it, so that the two can be held side by side. The office sees no photos and cannot open documents.
 *
 * @throws {Refusal} submission_not_found
 */
export async function viewSubmission(em: EntityManager, app: App, actor: Actor, id: string): Promise<SubmissionView> {
  const submission = await findSubmission(em, app, actor, id)
  const head = submission.head.$
  const { rubric } = head.rubric.$
  const teaches = await em.count(PracticeHead, { $and: [{ id: head.id }, await visibleHeads(em, app, actor, 'teach')] }) > 0
  const route = await loadRoute(em, app, head)
  const { evidence } = await gatherEvidence(em, submission)

  return {
    id: submission.id,
    head: headSummary(head, route),
    op: submission.op,
    stageName: rubric.stages.find(stage => stage.op === submission.op)?.name ?? '',
    rubricVersion: head.rubric.$.version,
    version: submission.version,
    part: submission.part,
    point: submission.point ? { code: submission.point, name: pointName(submission.point) } : null,
    try: submission.tryNumber,
    state: submission.state,
    decision: submission.decision ?? null,
    scoredVersion: submission.scoredVersion ?? null,
    score: submission.score ?? null,
    word: submission.word ?? null,
    note: submission.note,
    askedAt: submission.askedAt?.toISOString() ?? null,
    ports: submission.ports,
    acidCleaned: head.acidCleaned ?? null,
    ...await evidenceViews(em, actor, { studentId: head.student.id, taught: teaches }, [submission.id]),
    wanted: wantedViews(rubric, evidence),
    criteria: await submissionCriteria(em, submission),
    caution: { lines: cautionLines(submission.op) },
    firstTry: await firstTry(em, submission),
  }
}

async function firstTry(em: EntityManager, submission: FoundSubmission): Promise<SubmissionView['firstTry']> {
  if (submission.tryNumber === 1) return null
  const first = await em.findOne(Submission, { head: submission.head.id, op: submission.op, part: submission.part, tryNumber: 1 }, { populate: ['head.rubric'] })
  return first ? { id: first.id, criteria: await submissionCriteria(em, first) } : null
}
