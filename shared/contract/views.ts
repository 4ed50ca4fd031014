import { z } from 'zod'
import type { FlowRun, SheetHeader } from '../domain/airflow/flow-run'
import type { CastingCard } from '../domain/geometry/casting'
import type { CriterionState, Rubric, RubricStage } from '../domain/rubric/criterion'
import type { CriterionResult, ReadingEvidence } from '../domain/rubric/evidence'
import type { Side } from '../domain/units/port'
import { cleanText } from './text'
import type { ConsentState } from './safety'

/** What the server answers and the pages draw. Times are ISO strings; lengths mm unless a name says otherwise. */

export interface MeView { id: string, name: string, email: string, roles: ('student' | 'instructor' | 'admin' | 'safety')[], unit: 'mm' | 'in', places: { cohort: string, code: string, state: string, slot: number | null, finishedAt: string | null }[] }

export type StageState = 'shut' | 'open' | 'held' | 'done'
export type PointState = 'shut' | 'asked' | 'released' | 'released with a condition' | 'sent back' | 'stopped' | 'told' | 'seen' | 'not seen'

export interface PointView { code: string, name: string, kind: 'hold' | 'witness', when: string, state: PointState, at: string | null, by: string | null, conditions: string[], waitUntil: string | null }
export interface StageView { op: number, code: string, name: string, state: StageState, why: string | null, points: PointView[], lessons: { number: number, slug: string, title: string }[], submission: { id: string, part: string, try: number, state: string } | null }

export interface HeadSummary { id: string, number: string, student: { id: string, name: string }, cohort: { code: string, name: string } | null, casting: { code: string, name: string, cylinders: number }, state: 'received' | 'working' | 'held' | 'stopped' | 'finished' | 'scrapped' | 'sawn', stageNow: { op: number, name: string } | null }
export interface HeadView extends HeadSummary { rubricVersion: number, stages: StageView[], stops: { id: string, where: string, reason: string, by: string, at: string }[] }

/** Everything known at every spot of a head, newest first at each. */
export interface SpotView { quantity: string, title: string, cylinder: number | null, side: Side | null, spot: string | null, op: number, value: number, unit: string, expandedUncertainty: number, asTyped: string[], typedUnit: string, instrument: string, takenAt: string, older: { value: number, op: number, takenAt: string }[] }

export interface WantedView { kind: 'photo' | 'reading' | 'flow-sheet' | 'document', view: string | null, viewName: string | null, quantity: string | null, title: string, cylinder: number | null, side: Side | null, spot: string | null, when: 'before' | 'after' | null, note: string | null, count: number, have: number, criteria: string[] }

export interface PhotoView { id: string, view: string, viewName: string, cylinder: number | null, side: Side | null, spot: string | null, state: 'taken' | 'being measured' | 'cannot use' | 'measured' | 'reviewed', problem: string | null, thumbUrl: string | null, previewUrl: string | null, width: number | null, height: number | null, takenAt: string, addedBy: string }
export interface ReadingView { id: string, quantity: string, cylinder: number | null, side: Side | null, at: Record<string, unknown> | null, spot: string | null, when: 'before' | 'after' | null, values: string[], unit: string, mean: number, baseUnit: string, expandedUncertainty: number, instrument: string, takenAt: string, voidedAt: string | null, addedBy: string }
export interface SheetView {
  id: string, uploadId: string, answers: Record<string, string>, version: number, kind: 'flow' | 'plate-log', state: 'raw' | 'read' | 'asked' | 'used' | 'set aside', filename: string, bench: string | null
  header: SheetHeader
  columns: { heading: string, meaning: string | null, unit: string | null, from: string }[]
  firstRows: string[][]
  runs: FlowRun[]
  findings: { code: string, severity: 'note' | 'ask' | 'refuse', lifts: number[], text: string }[]
  needs: { field: string, question: string, choices?: string[] }[]
  plateLog: unknown
}
/** What the pad needs to draw a gauge while figures are typed: the stage's criteria without their texts, and the casting. */
export interface GaugeView { stage: RubricStage, casting: CastingCard, readings: ReadingEvidence[] }
export interface DocumentView { id: string, filename: string, note: string, addedAt: string, url: string | null }

export interface ResultView extends Omit<CriterionResult, 'criterion'> {
  id: string
  override: { state: CriterionState, reason: string, by: string, at: string } | null
}
export interface CriterionView { id: string, title: string, kind: string, unit: string, weight: number, must: boolean, stop: boolean, state: CriterionState, machineState: CriterionState, stage: { op: number, code: string }, results: ResultView[] }

export interface SubmissionView {
  id: string
  head: HeadSummary
  op: number
  stageName: string
  rubricVersion: number
  version: number
  part: 'before' | 'first' | 'rest'
  point: { code: string, name: string } | null
  try: number
  state: 'draft' | 'asked' | 'scored' | 'decided'
  decision: 'release' | 'send-back' | 'stop' | null
  scoredVersion: number | null
  score: number | null
  word: string | null
  note: string
  askedAt: string | null
  ports: { cylinder: number, side: Side }[]
  /** Whether the core came from acid cleaning; null until somebody says. */
  acidCleaned: boolean | null
  photos: PhotoView[]
  readings: ReadingView[]
  sheets: SheetView[]
  documents: DocumentView[]
  wanted: WantedView[]
  criteria: CriterionView[]
  caution: { lines: string[] }
  firstTry: { id: string, criteria: CriterionView[] } | null
}

export interface QueueItem { id: string, head: { id: string, number: string }, student: string, cohort: string | null, op: number, stageName: string, part: string, try: number, point: { code: string, name: string } | null, state: string, askedAt: string, waitingMinutes: number, stopStands: boolean, states: Record<CriterionState, number>, youMaySign: boolean }

/** What the review screen needs beyond the submission: the criteria the point needs, whichever stage scored them, curves and earlier decisions. */
export interface ReviewSheetView {
  submission: SubmissionView
  criteria: CriterionView[]
  proposedFeedback: string
  curves: CurveSetView[]
  reviews: FeedbackView[]
  release: { allowed: boolean, refused: { criterion: string, cylinder: number | null, side: Side | null, at: string | null, state: string, why: string }[], needReason: { criterion: string, cylinder: number | null, side: Side | null }[], conditions: string[] }
  maySign: { may: boolean, why: string | null }
  signedBefore: { by: string, at: string }[]
  /** Other submissions the point covers, decided together with this one; send their versions back as `seenWith`. */
  others: { id: string, op: number, stageName: string, part: string, version: number, state: string, score: number | null, word: string | null }[]
}

/** What a review did. `complete` is false while the point waits for a second person's release. */
export interface ReviewAnswer { review: string, decision: 'release' | 'send-back' | 'stop', point: string | null, complete: boolean, conditions: string[], submission: { id: string, state: string, version: number, score: number | null, word: string | null } }

export interface CurveSetView { cylinder: number | null, side: Side, runs: { label: string, stage: string, op: number, date: string | null, points: { liftMm: number, cfm28: number, expandedUncertainty: number }[], missing: { liftMm: number, reason: string }[] }[], changes: { liftMm: number, cfm: number, expandedUncertainty: number, percent: number, verdict: 'gain' | 'loss' | 'no clear change' }[] | null }

export interface PinView { number: number, photoId: string, x: number, y: number, criterion: string, text: string }
export interface FeedbackView {
  id: string, submissionId: string, head: string, op: number, stageName: string, point: string | null, pointName: string | null, try: number, decision: 'release' | 'send-back' | 'stop', by: string, at: string, condition: string | null, conditions: string[], feedback: string
  score: number | null, word: string | null
  sentences: { criterion: string, title: string, cylinder: number | null, side: Side | null, at: string | null, state: CriterionState, text: string, edited: boolean }[]
  pins: PinView[]
  readAt: string | null
}

/** My bench: what a student needs before the next stroke. */
export interface BenchView {
  /** Whether the safety form is signed as it stands; without it every stage with a tool is shut. */
  consent: ConsentState
  head: HeadView | null
  otherHeads: HeadSummary[]
  today: { date: string, week: number | null, weeks: number | null }
  caution: string[]
  next: { op: number, stageName: string, stroke: string, lesson: { number: number, slug: string, title: string } | null, submission: { id: string, part: string, state: string } | null, offersStroke: boolean, why: string | null } | null
  metalLeft: { what: string, where: string, takeMm: number | null, stopAtMm: number, expandedUncertainty: number, valueMm: number, chanceUnderHardLeast: number, handAllowanceMm: number, band: CriterionResult['band'] }[]
  noMoreCutting: string[]
  waiting: { title: string, detail: string, state: string, to: string }[]
  wanted: WantedView[]
  fromInstructor: { by: string, at: string, text: string, submissionId: string } | null
}

/** One account, as the office sees it. */
export interface PersonView { id: string, name: string, email: string, roles: MeView['roles'], cohorts: string[], invited: boolean }
export interface CastingView { code: string, name: string, version: number, card: CastingCard }
export interface RubricSummary { version: number, note: string, savedAt: string, savedBy: string | null }
export interface RubricView extends RubricSummary { rubric: Rubric }
export interface InstrumentView { code: string, name: string, quantities: string[], expandedU: number, relative: boolean, unit: string, due: string | null }
/** Who is held and for how long, worst first. */
export interface ShopBoardView { items: { head: { id: string, number: string }, student: { id: string, name: string }, cohort: { code: string, name: string }, stops: { id: string, where: string, reason: string, by: string, at: string }[], waiting: { id: string, op: number, stageName: string, point: { code: string, name: string } | null, state: string, since: string, minutes: number, stopStands: boolean }[] }[] }
export interface SessionView { id: string, createdAt: string, expiresAt: string, agent: string, thisOne: boolean }
/** Work that did not come through, with what it said. */
export interface StuckJobView { id: string, kind: string, state: 'failed' | 'waiting to be tried again', data: Record<string, unknown>, tries: number, problem: string, createdAt: string, lastAt: string | null }
export interface Page<Item> { items: Item[], next: string | null }

/** Keyset paging: `after` is the `next` of the page before. */
export const pageQuery = z.object({ after: z.string().max(400).refine(text => text.isWellFormed() && !text.includes('\0'), 'is not a page').optional(), limit: z.coerce.number().int().min(1).max(100).default(25) })

export const queueQuery = pageQuery.extend({
  cohort: cleanText(20).optional(),
  point: cleanText(20).optional(),
  /** Only what the person may sign and has not signed. */
  mine: z.enum(['true', 'false']).default('false').transform(text => text === 'true'),
})
