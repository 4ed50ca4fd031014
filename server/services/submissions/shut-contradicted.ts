import type { EntityManager } from '@mikro-orm/postgresql'
import { PointRelease } from '#server/db/entities/PointRelease'
import { RubricVersion } from '#server/db/entities/RubricVersion'
import { PracticeHead } from '#server/db/entities/PracticeHead'
import type { Submission } from '#server/db/entities/Submission'
import type { App } from '#server/utils/app'
import { recordEvent } from '#server/utils/record-event'
import type { CriterionResult } from '#shared/domain/rubric/evidence'
import { criteriaOfPoint } from '#shared/domain/rubric/release-rule'

/**
 * Shuts released points again that newer results contradict: a must or stop the point rested on is now rejected at a unit its
 * release covered.
 *
 * Source: handbook 3.4, "New evidence after release shuts the point again only if it contradicts".
 */
export async function shutContradicted(tx: EntityManager, app: Pick<App, 'clock'>, submission: Submission, results: readonly CriterionResult[]): Promise<void> {
  const rejected = results.filter(one => one.state === 'reject')
  if (rejected.length === 0) return
  const releases = await tx.find(PointRelease, { head: submission.head.id, shutAgainAt: null }, { populate: ['review.submission'] })
  if (releases.length === 0) return
  const head = await tx.findOneOrFail(PracticeHead, submission.head.id)
  const { rubric } = await tx.findOneOrFail(RubricVersion, head.rubric.id)
  const points = rubric.stages.flatMap(stage => stage.points)
  for (const release of releases) {
    const point = points.find(one => one.code === release.point)
    if (!point) continue
    const binding = new Set(criteriaOfPoint(point, rubric.stages).filter(one => one.mustPass || one.safetyStop).map(one => one.id))
    const { ports } = release.review.$.submission.$
    const against = rejected.find(one => binding.has(one.criterion) && ports.some(port => (one.cylinder === null || one.cylinder === port.cylinder) && (one.side === null || one.side === port.side)))
    if (!against) continue
    release.shutAgainAt = app.clock.schoolNow()
    recordEvent(tx, { actor: 'score-submission', action: 'point.shut-again', subject: `head:${head.id}`, detail: { point: point.code, criterion: against.criterion, submission: submission.id, version: submission.version } })
  }
}
