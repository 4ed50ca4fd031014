import type { EvidenceSet, JudgedUnit, ReadingEvidence, SubmissionPart } from './evidence'
import { sameSpot } from './same-spot'

/** Which readings are meant. What is left out is not asked about. */
export interface ReadingsWanted {
  quantity: string
  /** Op they were taken in; the op being judged when left out. */
  op?: number
  unit?: JudgedUnit
  spot?: string
  when?: 'before' | 'after'
}

/**
 * Readings that count: of one op, newest at each spot, newest first.
 *
 * A reading without a spot stands for the quantity as a whole. One without "before" or "after" counts as what the part is:
 * before the first cut it is a "before", else an "after".
 */
export function readingsOf(evidence: EvidenceSet, wanted: ReadingsWanted): ReadingEvidence[] {
  const newest: ReadingEvidence[] = []
  for (const reading of allReadingsOf(evidence, wanted)) {
    const stands = newest.some(one => one.cylinder === reading.cylinder && one.side === reading.side && sameSpot(one.spot, reading.spot)
      && whenOf(one, evidence.part) === whenOf(reading, evidence.part))
    if (!stands) newest.push(reading)
  }
  return newest
}

/** The same with older readings at a spot kept, newest first. */
export function allReadingsOf(evidence: EvidenceSet, { quantity, op, unit, spot, when }: ReadingsWanted): ReadingEvidence[] {
  return evidence.readings
    .filter(reading => reading.quantity === quantity && reading.op === (op ?? evidence.op) && reading.values.length > 0)
    .filter(reading => unit === undefined || isReadOf(reading, unit))
    .filter(reading => spot === undefined || sameSpot(reading.spot, spot))
    .filter(reading => when === undefined || whenOf(reading, evidence.part) === when)
    .sort((a, b) => b.takenAt - a.takenAt || (a.id < b.id ? 1 : -1))
}

/** A reading that names no cylinder or side is of none: it must not stand for every port of the head. */
function isReadOf(reading: ReadingEvidence, unit: JudgedUnit): boolean {
  return (unit.cylinder === null || reading.cylinder === unit.cylinder) && (unit.side === null || reading.side === unit.side)
}

/** Whether evidence with this cylinder and side belongs to the unit: where the unit or the evidence says nothing, it does. */
export function isOf(one: { cylinder: number | null, side: string | null }, unit: JudgedUnit): boolean {
  return (unit.cylinder === null || one.cylinder === null || one.cylinder === unit.cylinder)
    && (unit.side === null || one.side === null || one.side === unit.side)
}

function whenOf(reading: ReadingEvidence, part: SubmissionPart): 'before' | 'after' {
  return reading.when ?? (part === 'before' ? 'before' : 'after')
}
