import type { Evaluated } from '../uncertainty/evaluated'
import { baseUnit } from './base-unit'
import type { Criterion } from './criterion'
import type { EvidenceSet, JudgedUnit, NotAssessed, ReadingEvidence } from './evidence'
import { readingsOf } from './readings-of'
import { readingValue } from './reading-value'
import { quantityInWords, unitInWords } from './words'

/** What "now" is for a part: before the first cut it is a "before", from then on an "after". A reading that says neither is of now. */
export function whenNow(evidence: Pick<EvidenceSet, 'part'>): { when: 'before' | 'after' } {
  return { when: evidence.part === 'before' ? 'before' : 'after' }
}

/** Readings of a quantity that count for a criterion now, one a spot; empty when nobody read it. */
export function readingsNow(evidence: EvidenceSet, criterion: Criterion, unit: JudgedUnit, quantity = criterion.quantity): ReadingEvidence[] {
  return readingsOf(evidence, { quantity, unit, ...whenNow(evidence) })
}

/** The same as values in the unit of the criterion. */
export function spotValues(evidence: EvidenceSet, criterion: Criterion, unit: JudgedUnit, quantity = criterion.quantity): Evaluated[] {
  return readingsNow(evidence, criterion, unit, quantity).map((reading) => {
    const value = readingValue(reading, baseUnit(criterion.unit))
    // A value of the whole head says which cylinder it was read at.
    const where = unit.cylinder === null && reading.cylinder !== null ? unitInWords({ cylinder: reading.cylinder, side: unit.side === null ? reading.side : null }) : null
    return { ...value, at: value.at === null ? where : where === null ? value.at : `${value.at}, ${where}` }
  })
}

/** The least or greatest of several values, with a step that says so. */
export function extreme(values: readonly Evaluated[], which: 'least' | 'greatest'): Evaluated | null {
  const [first] = [...values].sort((a, b) => which === 'least' ? a.value - b.value : b.value - a.value)
  if (!first || values.length === 1) return first ?? null
  return {
    ...first,
    trace: [...first.trace, { what: `${which} of ${values.length} spots`, sum: values.map(one => `${one.value.toFixed(2)}${one.at === null ? '' : ` (${one.at})`}`).join(', '), gives: `${first.value.toFixed(2)} ${first.unit}` }],
  }
}

/** Nobody read it. */
export function notRead(quantity: string, unit: JudgedUnit): NotAssessed {
  return { notAssessed: `Nobody has read the ${quantityInWords(quantity)} of ${unitInWords(unit)} yet.` }
}
