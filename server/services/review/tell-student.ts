import type { EntityManager } from '@mikro-orm/postgresql'
import { Lesson } from '#server/db/entities/Lesson'
import type { Review } from '#server/db/entities/Review'
import { firstName } from '#server/services/mail/first-name'
import { evidenceSentBack } from '#server/services/mail/templates/evidence-sent-back'
import { holdReleased } from '#server/services/mail/templates/hold-released'
import { stopped } from '#server/services/mail/templates/stopped'
import { writeMail } from '#server/services/mail/write-mail'
import { strokeWords } from '#server/services/school/stage-words'
import type { FoundSubmission } from '#server/services/submissions/find-submission'
import type { Actor } from '#server/utils/actor'
import type { App } from '#server/utils/app'
import { longDate, timeOfDay } from '#shared/contract/school-time'
import type { PointCase } from './point-case'
import { pointName } from '#shared/domain/rubric/route-state'
import { nextPart } from './point-words'
import { resultSpot } from './result-spot'
import { standingState } from './standing-state'
import type { CalledStop } from './stop-at-review'
import { isWallOrLeak } from './wall-or-leak'

const schoolTime = (at: Date): string => `${timeOfDay(at.toISOString())} on ${longDate(at.toISOString())}`
const feedbackUrl = (app: App, submission: FoundSubmission): string => `${app.config.publicUrl}/feedback/${submission.id}`

/** Message 9. */
export async function tellReleased(tx: EntityManager, app: App, actor: Actor, review: Review, submission: FoundSubmission, { rubric }: PointCase, added: readonly string[]): Promise<void> {
  const head = submission.head.$
  const point = submission.point ?? ''
  const next = nextPart(rubric, point)
  // A few dozen lessons; which ops one is for is an array column.
  const lesson = next === null ? undefined : (await tx.find(Lesson, {}, { orderBy: { number: 'asc' } })).find(one => one.ops.includes(next.op))
  await writeMail(tx, app, {
    key: `hold-released:${review.id}`,
    template: 'hold-released',
    to: head.student.$,
    letter: holdReleased({
      head: head.number,
      point: pointName(point),
      instructor: actor.name,
      at: schoolTime(review.at),
      conditions: [...new Set([...added, ...(review.condition ? [review.condition] : [])])],
      next: next === null ? null : strokeWords(next.op, next.part) || `${next.name}.`,
      lesson: lesson ? { number: lesson.number, title: lesson.title } : null,
      feedback: review.feedback,
      url: feedbackUrl(app, submission),
    }),
  })
}

const mostNamed = 12

/** Message 8. */
export async function tellSentBack(tx: EntityManager, app: App, actor: Actor, review: Review, submission: FoundSubmission, { criteria, rows, stage }: PointCase): Promise<void> {
  const head = submission.head.$
  const said = review.sentences
  const kindOf = (id: string) => criteria.find(criterion => criterion.id === id)
  const isMust = (id: string): boolean => Boolean(kindOf(id)?.mustPass || kindOf(id)?.safetyStop)
  const outside = said.filter(one => one.state === 'reject' || (one.state === 'not-assessed' && isMust(one.criterion)))
  const redo = outside.length > 0 ? outside : said.filter(one => one.state === 'borderline')
  const cut = rows.filter(row => ['reject', 'borderline'].includes(standingState(row)) && [row.result.band?.loKind, row.result.band?.hiKind].includes('no-return') && isMust(row.result.criterion))
  await writeMail(tx, app, {
    key: `evidence-sent-back:${review.id}`,
    template: 'evidence-sent-back',
    to: head.student.$,
    letter: evidenceSentBack({
      first: firstName(head.student.$.name),
      head: head.number,
      stage: stage.name,
      instructor: actor.name,
      accepted: said.filter(one => one.state === 'accept').length,
      assessed: said.length,
      redo: redo.slice(0, mostNamed).map(one => ({ criterion: one.cylinder === null && one.side === null ? one.title : `${one.title} (${resultSpot(one)})`, text: one.text })),
      where: [...new Set(cut.map(row => resultSpot(row.result)))].slice(0, 3),
      feedback: review.feedback,
      url: feedbackUrl(app, submission),
    }),
  })
}

/** Message 10. */
export async function tellStopped(tx: EntityManager, app: App, actor: Actor, review: Review, submission: FoundSubmission, { criteria, rows }: PointCase, { stop, row }: CalledStop): Promise<void> {
  const head = submission.head.$
  const criterion = criteria.find(one => one.id === row?.result.criterion)
  const others = rows.filter(one => one !== row).map(standingState)
  await writeMail(tx, app, {
    key: `stopped:${review.id}`,
    template: 'stopped',
    to: head.student.$,
    letter: stopped({
      first: firstName(head.student.$.name),
      head: head.number,
      where: stop.where,
      wallOrLeak: criterion !== undefined && isWallOrLeak(criterion),
      measured: row && criterion ? measuredWords(criterion.title, row.result) : null,
      reason: stop.reason,
      instructor: actor.name,
      nothingElse: others.every(state => state === 'accept' || state === 'does-not-apply'),
      url: feedbackUrl(app, submission),
    }),
  })
}

/** "Pushrod wall: 3.1 mm, limit 3.5 mm, doubt 0.15 mm"; null where there is no figure. */
function measuredWords(title: string, { value, unit, expandedUncertainty, band }: { value?: number | null, unit: string, expandedUncertainty?: number | null, band?: { lo: number | null, hi: number | null } | null }): string | null {
  if (value === null || value === undefined) return null
  const [first = ''] = unit.split(' ')
  const short = ['count', 'yes/no', 'ratio', '-'].includes(first) ? '' : first
  const figure = (number: number): string => `${Number(number.toFixed(2))} ${short}`.trim()
  const limit = !band ? null : band.lo !== null && value < band.lo + (expandedUncertainty ?? 0) ? band.lo : band.hi ?? band.lo
  return `${title}: ${figure(value)}${limit === null ? '' : `, limit ${figure(limit)}`}${typeof expandedUncertainty !== 'number' ? '' : `, doubt ${figure(expandedUncertainty)}`}`
}
