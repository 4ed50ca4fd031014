import type { EntityManager } from '@mikro-orm/postgresql'
import type { Loaded } from '@mikro-orm/core'
import { PointRelease } from '#server/db/entities/PointRelease'
import { Reading } from '#server/db/entities/Reading'
import { Submission } from '#server/db/entities/Submission'
import type { FoundSubmission } from '#server/services/submissions/find-submission'
import { criteriaOfPart } from '#shared/domain/rubric/covers'
import type { Criterion, Rubric, RubricPoint, RubricStage } from '#shared/domain/rubric/criterion'
import { neededUnits } from '#shared/domain/rubric/needed-units'
import { criteriaOfPoint, releaseVerdict, type ReleaseCase, type ReleaseVerdict } from '#shared/domain/rubric/release-rule'
import { stageAsDue } from '#shared/domain/rubric/stage-as-due'
import { pointResults, type StandingRow } from './point-results'
import { findPoint } from './point-words'
import { spotOf } from './result-spot'

export type CountedRelease = Loaded<PointRelease, 'review' | 'by'>

/** Everything one review is about. */
export interface PointCase {
  rubric: Rubric
  stage: RubricStage
  point: RubricPoint | null
  /** What the point needs and what the submission itself was judged on, in the rubric's order. */
  criteria: Criterion[]
  rows: StandingRow[]
  /** Submissions without a point of their own that are decided together with this one. */
  others: Submission[]
  /** Releases of this point that still count: of this try and of what it is now. */
  signedBefore: CountedRelease[]
  /** Releases that counted until the evidence moved on. */
  outdated: CountedRelease[]
}

/** Loads a submission's point case. The submission comes with head, casting and rubric. */
export async function loadPointCase(em: EntityManager, submission: FoundSubmission): Promise<PointCase> {
  const head = submission.head.$
  const { rubric } = head.rubric.$
  const stage = stageAsDue(rubric, submission.op)
  const point = submission.point ? findPoint(rubric, submission.point)?.point ?? null : null
  const own = criteriaOfPart(stage, submission.part)
  const needed = point ? criteriaOfPoint(point, rubric.stages) : []
  const criteria = rubric.stages.flatMap(one => one.criteria).filter(criterion => needed.includes(criterion) || own.includes(criterion))

  const waiting = await em.find(Submission, { head: head.id, point: null, state: { $in: ['asked', 'scored'] }, id: { $ne: submission.id } }, { orderBy: { op: 'asc', part: 'asc' }, refresh: true })
  const others = point === null ? [] : waiting.filter(other => stageAsDue(rubric, other.op).criteria.some(criterion => needed.includes(criterion)))
  const releases = !submission.point
    ? []
    : await em.find(PointRelease, { head: head.id, point: submission.point, shutAgainAt: null, review: { submission: submission.id } }, { populate: ['review', 'by'], orderBy: { at: 'asc' } })
  const counts = (release: CountedRelease): boolean => release.review.$.seenVersion === submission.version
  return {
    rubric, stage, point, criteria, others,
    rows: await pointResults(em, head.id, criteria),
    signedBefore: releases.filter(counts),
    outdated: releases.filter(release => !counts(release)),
  }
}

/** What the release rule says if this person released now, with these reasons. */
export async function verdictFor(em: EntityManager, submission: FoundSubmission, { rubric, point, rows, signedBefore }: PointCase, by: string, reasons: ReleaseCase['reasons']): Promise<ReleaseVerdict | null> {
  if (point === null) return null
  const head = submission.head.$
  const onBehalf = await em.find(Reading, { submission: { head: head.id }, addedBy: { $ne: head.student.id }, voidedAt: null }, { populate: ['submission'] })
  return releaseVerdict({
    point,
    stages: rubric.stages,
    units: neededUnits(point, rubric.stages, head.casting.$.card, submission.ports, head.acidCleaned ?? null),
    results: rows.map(row => ({ criterion: row.result.criterion, ...spotOf(row.result), state: row.result.state, overriddenTo: row.override?.state ?? null })),
    reasons,
    by,
    student: head.student.id,
    enteredOnBehalf: onBehalf.map(reading => ({ by: reading.addedBy.id, quantity: reading.quantity, op: reading.submission.$.op })),
    signedBefore: signedBefore.map(release => release.by.id),
  })
}
