import type { Side } from '../units/port'

/** State of a criterion, of one of its results, or of an override. */
export type CriterionState = 'accept' | 'borderline' | 'reject' | 'not-assessed' | 'does-not-apply'

/** What lies beyond an end of an accept interval (handbook 3.1). */
export type EndKind = 'natural' | 'no-return' | 'put-right'

export interface AcceptBand {
  /** "*", casting letter ("D"), casting and side ("DI"), or with a lift as share of the valve ("DI@0.12"). */
  scope: string
  lo: number | null
  hi: number | null
  loKind: EndKind
  hiKind: EndKind
  /** Wall the band is for, where one criterion has several ("fin root"). */
  at?: string
  /** Scope this band was borrowed from until the school has its own. */
  borrowedFrom?: string
}
export type SoftBand = Omit<AcceptBand, 'loKind' | 'hiKind'>

export interface Want {
  kind: 'photo' | 'reading' | 'flow-sheet' | 'document'
  view?: string
  quantity?: string
  per: 'head' | 'cylinder' | 'port'
  side?: Side
  /** Spots, each of which is wanted. */
  places?: string[]
  when?: 'before' | 'after'
  count: number
  note?: string
}

export type FeedbackKey = 'accept' | 'borderline' | 'reject' | 'borderlineLow' | 'borderlineHigh' | 'rejectLow' | 'rejectHigh' | 'rejectLowLifts' | 'rejectDigits' | 'rejectRatio' | 'rejectTop'

export interface Criterion {
  id: string
  title: string
  kind: 'judged' | 'measured' | 'photo-measured' | 'derived from flow'
  quantity: string
  where?: string
  unit: string
  accept: AcceptBand[]
  soft: SoftBand[]
  weight: number
  mustPass: boolean
  safetyStop: boolean
  expandedU: { value: number, unit: string, relative: boolean } | null
  readingU?: { value: number, unit: string, relative: boolean }
  evidence: string
  wants: Want[]
  basis: string
  feedback: Partial<Record<FeedbackKey, string>>
  examples?: { for: string, text: string, example: true }[]
  doesNotApply?: { scope?: string, when?: string, because: string }[]
  borrowedNote?: string
  rule?: 'flow-loss'
  /** Point at which it is due, when not with its stage. */
  dueAt?: string
}

export interface RubricPoint {
  code: string
  kind: 'hold' | 'witness'
  when: 'before' | 'first' | 'last-cut' | 'after'
  signers: string[]
  signersNeeded?: number
  waitMinutes?: number
  /** Stage codes ("W") or criterion ids ("T-01"). */
  needs: string[]
}

export interface RubricStage {
  code: string
  op: number
  name: string
  points: RubricPoint[]
  clearances: string[]
  staffClearances?: string[]
  criteria: Criterion[]
}

export interface Rubric {
  version: number
  note: string
  views: Record<string, string>
  signerPosts: Record<string, string>
  standIns: Record<string, string[]>
  liftRule: string
  stages: RubricStage[]
}
