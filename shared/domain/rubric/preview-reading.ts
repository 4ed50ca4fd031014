import type { CastingCard } from '../geometry/casting'
import { convert } from '../units/convert'
import { parseTypedNumber } from '../units/parse-typed-number'
import type { PortRef, Side } from '../units/port'
import { baseUnit } from './base-unit'
import type { Criterion, RubricStage } from './criterion'
import { decide } from './decide'
import type { CriterionResult, EvidenceSet, ReadingEvidence, SubmissionPart } from './evidence'
import { judgeCriterion } from './judge-submission'

export interface ReadingPreview {
  stage: RubricStage
  casting: CastingCard
  /** Readings of the head that stand already. */
  readings: readonly ReadingEvidence[]
  op: number
  part: SubmissionPart
  ports: PortRef[]
  /** The spot on the pad. */
  want: { quantity: string | null, cylinder: number | null, side: Side | null, spot: string | null, when: 'before' | 'after' | null }
  /** Repeats as typed, and their unit. */
  typed: readonly string[]
  unit: string
  instrument: { code: string, expandedU: number, relative: boolean, unit: string }
}

/**
 * What the figures on the pad come to against the rubric, before they are sent: the same evaluators and the same decision as the
 * server's, over the readings that stand with these in their place. A result whose other spots are still wanted is shown by
 * its value alone. Empty when nothing of the rubric gauges this reading, or the figures cannot be read yet.
 */
export function previewReading(preview: ReadingPreview): CriterionResult[] {
  const values = preview.typed.map(text => parseTypedNumber(text))
  const unit = baseUnit(preview.unit)
  if (preview.want.quantity === null || values.some(value => !value.ok)) return []
  const numbers = values.map(value => convert(value.ok ? value.value : 0, preview.unit, unit))
  const mean = numbers.reduce((sum, value) => sum + value, 0) / numbers.length
  const reading: ReadingEvidence = {
    ...preview.want, quantity: preview.want.quantity, id: 'pad', op: preview.op, values: numbers, unit, instrument: preview.instrument.code,
    expandedU: preview.instrument.relative ? Math.abs(mean) * preview.instrument.expandedU / 100 : preview.instrument.expandedU,
    takenAt: Number.MAX_SAFE_INTEGER,
  }
  const evidence: EvidenceSet = {
    casting: preview.casting, op: preview.op, part: preview.part, ports: preview.ports, readings: [...preview.readings, reading],
    photos: [], documents: [], sheets: [], judged: [], acidCleaned: null, handAllowanceMm: 0.15,
  }
  return preview.stage.criteria.filter(criterion => reads(criterion, reading.quantity)).flatMap(criterion => judgeCriterion(criterion, evidence)
    .filter(result => result.value !== null && result.band !== null && ofPort(result, preview.want))
    .map(result => ({ ...result, state: stateSoFar(criterion, result) })))
}

const reads = (criterion: Criterion, quantity: string) => criterion.unit !== 'yes/no' && criterion.kind !== 'judged'
  && (criterion.quantity === quantity || criterion.wants.some(want => want.kind === 'reading' && want.quantity === quantity))

const ofPort = (result: CriterionResult, want: ReadingPreview['want']) => (result.cylinder === null || want.cylinder === null || result.cylinder === want.cylinder) && (result.side === null || want.side === null || result.side === want.side)

function stateSoFar(criterion: Criterion, result: CriterionResult): CriterionResult['state'] {
  if (result.state !== 'not-assessed' || result.value === null || result.band === null) return result.state
  return decide(result.value, result.expandedUncertainty, result.band as Parameters<typeof decide>[2], criterion.mustPass).state
}
