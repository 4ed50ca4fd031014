import { IsolationLevel, LockMode, type EntityManager } from '@mikro-orm/postgresql'
import { CriterionResult } from '#server/db/entities/CriterionResult'
import { ScoreSet } from '#server/db/entities/ScoreSet'
import { Submission } from '#server/db/entities/Submission'
import type { App } from '#server/utils/app'
import { signal } from '#server/utils/signals'
import { judgeSubmission } from '#shared/domain/rubric/judge-submission'
import { stageAsDue } from '#shared/domain/rubric/stage-as-due'
import type { Judgement } from '#shared/domain/rubric/evidence'
import type { FoundSubmission } from './find-submission'
import { gatherEvidence } from './gather-evidence'
import { shutContradicted } from './shut-contradicted'

interface Judged { version: number, judgement: Judgement, restsOn: ScoreSet['restsOn'], stopStands: boolean }

/**
 * Scores a submission as it stands: the job `score-submission`.
 *
 * Evidence and version are read in one snapshot, judged outside any transaction, and the whole result set is written in another:
 * all of it or nothing, once a version, however often it runs and wherever it is killed. A version raised meanwhile has a job of
 * its own.
 */
export async function scoreSubmission(app: Pick<App, 'orm' | 'clock'>, submissionId: string): Promise<void> {
  const judged = await app.orm.em.fork().transactional(tx => judgeAsItStands(tx, submissionId), { isolationLevel: IsolationLevel.REPEATABLE_READ, readOnly: true })
  if (judged) await app.orm.em.fork().transactional(tx => keep(tx, app, submissionId, judged))
}

async function judgeAsItStands(tx: EntityManager, submissionId: string): Promise<Judged | null> {
  const submission = await tx.findOne(Submission, { id: submissionId, state: 'asked' }, { populate: ['head.student', 'head.cohort', 'head.casting', 'head.rubric'] })
  if (!submission) return null
  const { evidence, restsOn } = await gatherEvidence(tx, submission as FoundSubmission)
  const stage = stageAsDue(submission.head.$.rubric.$.rubric, submission.op)
  const judgement = judgeSubmission(stage, evidence)
  const stops = new Set(stage.criteria.filter(one => one.safetyStop).map(one => one.id))
  const stopStands = judgement.results.some(one => stops.has(one.criterion) && (one.state === 'reject' || one.state === 'borderline'))
  return { version: submission.version, judgement, restsOn, stopStands }
}

async function keep(tx: EntityManager, app: Pick<App, 'clock'>, submissionId: string, { version, judgement, restsOn, stopStands }: Judged): Promise<void> {
  const submission = await tx.findOneOrFail(Submission, { id: submissionId }, { lockMode: LockMode.PESSIMISTIC_WRITE })
  // Somebody else was quicker, or decided it meanwhile on the version they saw.
  if (submission.state === 'decided' || (submission.scoredVersion ?? 0) >= version) return
  const scoredAt = app.clock.schoolNow()
  const set = tx.create(ScoreSet, { submission, version, score: judgement.score, word: judgement.word, restsOn, scoredAt })
  tx.persist(set)
  await tx.flush()
  await tx.insertMany(CriterionResult, judgement.results.map((result, position) => ({
    id: crypto.randomUUID(), set: set.id, criterion: result.criterion, cylinder: result.cylinder, side: result.side, at: result.at, liftMm: result.liftMm, state: result.state,
    value: result.value, unit: result.unit, expandedUncertainty: result.expandedUncertainty, pConform: result.pConform, metalLeft: result.metalLeft, text: result.text,
    trace: result.trace, band: result.band, typedForPhoto: result.typedForPhoto, position,
  })))
  submission.scoredVersion = version
  submission.scoredAt = scoredAt
  submission.score = judgement.score
  submission.word = judgement.word
  submission.stopStands = stopStands
  if (submission.version === version) submission.state = 'scored'
  await shutContradicted(tx, app, submission, judgement.results)
  await signal(tx, { kind: 'submission', id: submissionId })
}
