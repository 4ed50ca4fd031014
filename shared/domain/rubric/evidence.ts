import type { FlowRun, SheetHeader } from '../airflow/flow-run'
import type { CastingCard } from '../geometry/casting'
import type { Evaluated } from '../uncertainty/evaluated'
import type { Side } from '../units/port'
import type { Criterion, CriterionState, RubricStage } from './criterion'

/**
 * A reading as it stands: its repeats at one spot, in the quantity's own unit (mm for every length, whatever was typed).
 * Voided readings never reach the domain. `expandedU` is the instrument's own, k = 2, in the same unit.
 */
export interface ReadingEvidence {
  id: string
  quantity: string
  /** Op of the stage the reading was taken in, so that before and after, baseline and now, can be told apart. */
  op: number
  cylinder: number | null
  side: Side | null
  /** Spot in the words of the want ("12-6", "bowl, fore", "10 min", "station 30"); null when the quantity has no spot. */
  spot: string | null
  when: 'before' | 'after' | null
  values: number[]
  unit: string
  instrument: string
  expandedU: number
  /** Milliseconds of the epoch; the newest reading at a spot is the one that counts. */
  takenAt: number
}

/** A photo that can be used as evidence (not "cannot use"). */
export interface PhotoEvidence { id: string, view: string, op: number, cylinder: number | null, side: Side | null, spot: string | null, takenAt: number }

/** A document (damage list, route card, signed caution) held for a stage. */
export interface DocumentEvidence { id: string, op: number, note: string }

/** A flow sheet in use: header and its runs, reduced to the one basis. */
export interface SheetEvidence { id: string, op: number, header: SheetHeader, runs: FlowRun[], takenAt: number }

/** What an instructor gave for a judged criterion. */
export interface JudgedEvidence { criterion: string, cylinder: number | null, side: Side | null, state: 'accept' | 'borderline' | 'reject', note: string }

/** Everything the judgement of one submission rests on: the whole head's evidence up to this version, and what the part due covers. */
export interface EvidenceSet {
  casting: CastingCard
  /** Op of the stage asked for. */
  op: number
  /** Part of the stage that is due; says whether "before" or "after" readings count, and which criteria are judged. */
  part: SubmissionPart
  /** Ports the part that is due covers: one for a first article, all for the rest. */
  ports: { cylinder: number, side: Side }[]
  readings: ReadingEvidence[]
  photos: PhotoEvidence[]
  documents: DocumentEvidence[]
  sheets: SheetEvidence[]
  judged: JudgedEvidence[]
  /** null: nobody has said. */
  acidCleaned: boolean | null
  /** The student's hand allowance, mm; 0.15 until known. */
  handAllowanceMm: number
}

/** Part of a stage a submission is of: before its first cut, its first article, or the rest of it. */
export type SubmissionPart = 'before' | 'first' | 'rest'

/** A reason a value cannot be had: shown to people, so a whole sentence. */
export interface NotAssessed { notAssessed: string }

/** What the judge tells an evaluator when it asks for the figures of a sentence. */
export interface FillContext { state: CriterionState, value: Evaluated, limit: number | null }

/** What an evaluator found for one port (or head, or cylinder). */
export interface Measured {
  /** Values by spot and lift; the worst of those that share a band decides. Never empty. `liftShare` names the band a lift is for. */
  values: (Evaluated & { liftShare?: number })[]
  /** What is still to be read, in words for people. The rest was read, so what is lost beyond doubt already shows. */
  missing?: string[]
  /** Set where the rule is not a band but a verdict of its own (flow losses, completeness). */
  verdict?: CriterionState
  /** Ending of a feedback key that fits only this finding: "LowLifts", "Digits", "Ratio", "Top". */
  finding?: string
  /** Figures for the sentence beside {value}, {U}, {limit} and {where}; they win over those. */
  fill?: (context: FillContext) => Record<string, string>
  /** Spots (`at`) for which the sentences of one side would say something untrue; the plain ones serve. */
  plainAt?: string[]
  /** The criterion counts the readings themselves, so a reading that is missing is part of the value and not a gap in it. */
  countsReadings?: boolean
}

/** What an evaluator answers: values, or why there is none. */
export type Evaluation = Measured | NotAssessed

/** One judged result: what the server stores as CriterionResult and the pages show. */
export interface CriterionResult {
  criterion: string
  cylinder: number | null
  side: Side | null
  at: string | null
  liftMm: number | null
  state: CriterionState
  value: number | null
  unit: string
  /** The U that decided, k = 2: the evaluator's own, never less than the rubric's. */
  expandedUncertainty: number | null
  pConform: number | null
  /** Only where metal may still be taken toward a no-return least; `takeMm` null means "stop; show the map". */
  metalLeft: { takeMm: number | null, stopAtMm: number, chanceUnderHardLeast: number } | null
  /** The sentence for the student, every brace filled. */
  text: string
  trace: Evaluated['trace']
  /**
   * Accept band this was judged against, for the gauge strip. `beyond` tells an over-cut ("past": metal is gone or something leaks)
   * from a not-yet-cut ("short": it can still be done) where the state is borderline or reject.
   */
  band: { lo: number | null, hi: number | null, loKind: string, hiKind: string, softLo: number | null, softHi: number | null, borrowedFrom: string | null, beyond?: 'past' | 'short' | null } | null
  /** True where a person read a value the program will later measure from the photo itself. */
  typedForPhoto: boolean
}

/** The judgement of one submission. */
export interface Judgement {
  results: CriterionResult[]
  criteria: { id: string, state: CriterionState }[]
  score: number | null
  word: 'not yet' | 'Sound' | 'Workable' | 'Rework'
}

/** What one result is of: a port, a cylinder (no side), the head (neither), or one side of the head whose cylinder nobody knows yet. */
export interface JudgedUnit { cylinder: number | null, side: Side | null }

export type Evaluator = (evidence: EvidenceSet, criterion: Criterion, unit: JudgedUnit) => Evaluation
export type Judge = (stage: RubricStage, evidence: EvidenceSet) => Judgement
