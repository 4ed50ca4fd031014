import type { Criterion } from './criterion'
import type { EvidenceSet, Evaluator, JudgedUnit } from './evidence'
import { atEachSpot } from './evaluators/at-each-spot'
import { beforeLessAfter } from './evaluators/before-less-after'
import { benchRangeUsed } from './evaluators/bench-range-used'
import { chamberVolume } from './evaluators/chamber-volume'
import { curveResidual } from './evaluators/curve-residual'
import { dischargeCoefficient } from './evaluators/discharge-coefficient'
import { exhaustIntakeRatio } from './evaluators/exhaust-intake-ratio'
import { flowChange } from './evaluators/flow-change'
import { flowGain } from './evaluators/flow-gain'
import { flowRepeat } from './evaluators/flow-repeat'
import { greatestOfSpots } from './evaluators/greatest-of-spots'
import { guideBossWidth } from './evaluators/guide-boss-width'
import { guideOffset } from './evaluators/guide-offset'
import { leak } from './evaluators/leak'
import { leastOfSpots } from './evaluators/least-of-spots'
import { liftZero } from './evaluators/lift-zero'
import { meanRadialCut } from './evaluators/mean-radial-cut'
import { plateDifference } from './evaluators/plate-difference'
import { plateMoved } from './evaluators/plate-moved'
import { portVolume } from './evaluators/port-volume'
import { portWidth } from './evaluators/port-width'
import { pressureDrop } from './evaluators/pressure-drop'
import { seatLand } from './evaluators/seat-land'
import { seatLandSpread } from './evaluators/seat-land-spread'
import { sectionArea } from './evaluators/section-area'
import { shapeChange } from './evaluators/shape-change'
import { spreadBetweenCylinders } from './evaluators/spread-between-cylinders'
import { sumOfSpots } from './evaluators/sum-of-spots'
import { testPressureDrift } from './evaluators/test-pressure-drift'
import { throatDiameter } from './evaluators/throat-diameter'
import { valveSize } from './evaluators/valve-size'
import { wallThickness } from './evaluators/wall-thickness'
import { weightedFlowGain } from './evaluators/weighted-flow-gain'
import { changeUnits, cylinderUnits, everyCylinder, headSideUnits, headUnit, sideUnits } from './flow-units'

/** How a quantity is evaluated, and over what where its wants do not say. */
export interface Registered {
  evaluate: Evaluator
  units?: (criterion: Criterion, evidence: EvidenceSet) => JudgedUnit[]
}

/** One evaluator a quantity; several criteria may share one. */
const byQuantity: Readonly<Record<string, Registered>> = {
  'deck-flatness': { evaluate: greatestOfSpots },
  'guide-rock': { evaluate: greatestOfSpots },
  'seat-land': { evaluate: seatLand },
  'seat-land-spread': { evaluate: seatLandSpread },
  'valve-size': { evaluate: valveSize, units: headUnit },
  'rinse-ph': { evaluate: atEachSpot },
  'crack-indications': { evaluate: sumOfSpots },
  'pressure-drop': { evaluate: pressureDrop },
  'throat-diameter': { evaluate: throatDiameter },
  'wall-thickness': { evaluate: wallThickness, units: (criterion, evidence) => criterion.unit === 'points' ? everyCylinder(criterion, evidence) : unitsByWants(criterion, evidence) },
  'section-area': { evaluate: sectionArea },
  'chamber-volume': { evaluate: chamberVolume, units: (criterion, evidence) => (criterion.where ?? '').includes('largest mean') ? headUnit() : unitsByWants(criterion, evidence) },
  'plate-difference': { evaluate: (evidence, criterion, unit) => (criterion.where === undefined ? plateDifference : plateMoved)(evidence, criterion, unit) },
  'leak': { evaluate: leak, units: sideUnits },
  'flow-repeat': { evaluate: flowRepeat, units: sideUnits },
  'lift-zero': { evaluate: liftZero, units: sideUnits },
  'flow-change': { evaluate: flowChange, units: changeUnits },
  'flow-gain': { evaluate: flowGain, units: changeUnits },
  'weighted-flow-gain': { evaluate: weightedFlowGain, units: changeUnits },
  'discharge-coefficient': { evaluate: dischargeCoefficient, units: sideUnits },
  'curve-residual': { evaluate: curveResidual, units: sideUnits },
  'test-pressure-drift': { evaluate: testPressureDrift, units: sideUnits },
  'bench-range-used': { evaluate: benchRangeUsed, units: sideUnits },
  'exhaust-intake-ratio': { evaluate: exhaustIntakeRatio, units: cylinderUnits },
  'cylinder-spread': { evaluate: spreadBetweenCylinders, units: headSideUnits },
  'dummy-height': { evaluate: atEachSpot },
  'floor-hump': { evaluate: atEachSpot },
  'mean-radial-cut': { evaluate: meanRadialCut, units: everyCylinder },
  'guide-boss-width': { evaluate: guideBossWidth },
  'guide-length': { evaluate: beforeLessAfter },
  'apex-height': { evaluate: beforeLessAfter },
  'port-width': { evaluate: portWidth },
  'guide-offset': { evaluate: guideOffset },
  'port-volume': { evaluate: portVolume },
  'shape-change': { evaluate: shapeChange },
  'agreeing-readings': { evaluate: atEachSpot },
  // Measured from the photo one day; until then a person types the reading.
  'line-width': { evaluate: atEachSpot },
  'bore-line-offset': { evaluate: atEachSpot },
  'shroud-arc-error': { evaluate: atEachSpot },
  'no-grind-hatching': { evaluate: leastOfSpots },
  'land-showing': { evaluate: greatestOfSpots },
  'bore-line-margin': { evaluate: leastOfSpots },
  'shroud-gap': { evaluate: leastOfSpots },
  'plug-edge-radius': { evaluate: atEachSpot },
  'no-grind-area-cut': { evaluate: sumOfSpots },
  'land-nicks': { evaluate: sumOfSpots },
  'under-seat-radius': { evaluate: atEachSpot },
  'floor-drop': { evaluate: greatestOfSpots },
  'entry-step': { evaluate: atEachSpot },
  'exit-step': { evaluate: atEachSpot },
  'roof-hump': { evaluate: atEachSpot },
  'short-turn-radius': { evaluate: leastOfSpots },
  'grit': { evaluate: leastOfSpots },
  'cut-offset': { evaluate: greatestOfSpots },
}

/** The evaluator of a criterion's quantity; null where this version has none. */
export function evaluatorOf(criterion: Criterion): Registered | null {
  return Object.hasOwn(byQuantity, criterion.quantity) ? byQuantity[criterion.quantity] ?? null : null
}

/**
 * Ports, cylinders, or head, as what a criterion wants is wanted for: its readings and sheets first, then its photos, then its papers.
 *
 * A want for each cylinder of one side is a port; one for the head of one side is that side, at the cylinder its newest reading names.
 */
export function unitsByWants(criterion: Criterion, evidence: EvidenceSet): JudgedUnit[] {
  const values = criterion.wants.filter(want => want.kind === 'reading' || want.kind === 'flow-sheet')
  const wants = values.length > 0 ? values : criterion.wants.filter(want => want.kind === 'photo')
  const per = wants.some(want => want.per === 'port') ? 'port' : wants.some(want => want.per === 'cylinder') ? 'cylinder' : 'head'
  const named = new Set(wants.filter(want => want.per === per).map(want => want.side))
  const ports = evidence.ports.filter(port => named.has(undefined) || named.has(port.side))
  if (per === 'port' || (per === 'cylinder' && named.size > 0 && !named.has(undefined))) return ports.map(({ cylinder, side }) => ({ cylinder, side }))
  if (per === 'cylinder') return everyCylinder(criterion, evidence)
  const sides = (['intake', 'exhaust'] as const).filter(side => named.has(side) && ports.some(port => port.side === side))
  if (sides.length === 0) return named.size > 0 && !named.has(undefined) ? [] : headUnit()
  return sides.map(side => ({ side, cylinder: newestCylinder(criterion, evidence, side) }))
}

function newestCylinder(criterion: Criterion, evidence: EvidenceSet, side: 'intake' | 'exhaust'): number | null {
  const quantities = [criterion.quantity, ...criterion.wants.map(want => want.quantity)]
  const [newest] = evidence.readings.filter(reading => reading.op === evidence.op && reading.side === side && reading.cylinder !== null && quantities.includes(reading.quantity))
    .sort((a, b) => b.takenAt - a.takenAt)
  return newest?.cylinder ?? null
}
