import { metalLeft, type MetalLeft } from '../geometry/metal-left'
import type { RubricStage } from './criterion'
import type { CriterionResult, EvidenceSet } from './evidence'
import { judgeCriterion } from './judge-submission'

/** Metal a stage may still take at one spot, from the newest reading there whichever stage read it. */
export interface MetalToTake extends MetalLeft {
  criterion: string
  title: string
  cylinder: number | null
  side: 'intake' | 'exhaust' | null
  at: string | null
  valueMm: number
  expandedUncertainty: number
  band: CriterionResult['band']
}

const ofMetal = new Set(['wall-thickness', 'guide-boss-width', 'bore-line-margin', 'seat-land'])

/**
 * What may still be taken in a stage before a least beyond which there is no return: its walls, lands and margins, the tightest first.
 *
 * Readings of earlier stages count until the stage has its own (a baseline map says what the wall is before the first stroke), each
 * spot by its newest. Whether the proof is complete does not matter here: the metal is what it is.
 *
 * Source: handbook 3.1, *metal left*.
 */
export function metalToTake(stage: RubricStage, evidence: EvidenceSet): MetalToTake[] {
  const sofar: EvidenceSet = { ...evidence, readings: evidence.readings.filter(one => one.op <= evidence.op).map(one => ({ ...one, op: evidence.op })) }
  return stage.criteria.filter(one => one.unit === 'mm' && ofMetal.has(one.quantity)).flatMap(criterion =>
    judgeCriterion(criterion, sofar).flatMap((result): MetalToTake[] => {
      const { value, expandedUncertainty, band } = result
      if (value === null || expandedUncertainty === null || expandedUncertainty === 0 || band === null || band.lo === null || band.loKind !== 'no-return') return []
      const left = metalLeft({ readingMm: value, expandedUncertainty, acceptLeastMm: band.lo, hardLeastMm: band.softLo ?? band.lo, handAllowanceMm: evidence.handAllowanceMm })
      return [{ ...left, criterion: criterion.id, title: criterion.title, cylinder: result.cylinder, side: result.side, at: result.at, valueMm: value, expandedUncertainty, band }]
    })).sort((a, b) => (a.takeMm ?? -1) - (b.takeMm ?? -1) || b.chanceUnderHardLeast - a.chanceUnderHardLeast)
}
