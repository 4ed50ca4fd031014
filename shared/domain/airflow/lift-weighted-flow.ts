import type { TraceStep } from '../uncertainty/evaluated'
import { assertPositive } from './assert-positive'
import type { FlowRun } from './flow-run'

/** One fair number for a whole curve. */
export interface WeightedFlow {
  cfm28: number
  /** k = 2; the scatter of single readings averages out, the bench's share does not. */
  expandedUncertainty: number
  trace: TraceStep[]
}

/** Panels over half the valve-open angle; the lift curve is symmetric. Doubling it changes the ninth digit. */
const panels = 720

/**
 * Flow averaged over the time the valve is open, its lift rising and falling as sin² to the card's greatest lift.
 *
 * Between readings straight lines are drawn, from no flow at no lift: the school's figures are made so, and anyone can follow it on
 * paper. A smooth curve would give about 0.2 % more on every sheet alike, so gains hardly move. The last reading stands for lifts above it, but only if the sheet
 * reaches 95 % of the card's greatest lift; shorter sheets have no weighted flow (null).
 * The sin² curve is a teaching stand-in, not any engine's.
 *
 * Units: mm; cfm at the one basis.
 * Source: handbook 3.5 and 8.6. The sum is the trapezium rule, exact for sin² itself.
 *
 * @throws {RangeError} unless the greatest lift is above zero and the run has at least three points
 */
export function liftWeightedFlow(run: FlowRun, maxLiftMm: number): WeightedFlow | null {
  assertPositive('liftWeightedFlow', { 'greatest lift': maxLiftMm })
  const { points } = run
  const last = points[points.length - 1]
  if (points.length < 3 || !last) throw new RangeError('liftWeightedFlow requires a run of at least three points')
  if (last.liftMm < 0.95 * maxLiftMm) return null

  let sum = 0
  for (let i = 0; i <= panels; i++) {
    const lift = maxLiftMm * Math.sin(i / panels * Math.PI / 2) ** 2
    sum += (i === 0 || i === panels ? 0.5 : 1) * straightLine(points, Math.min(lift, last.liftMm))
  }
  const cfm28 = sum / panels
  // Half of the share is common to every reading of a sheet (plate, temperature); the other parts scatter from lift to lift.
  const common = 0.0035 * cfm28
  const scatter = Math.hypot(Math.sqrt(0.007 ** 2 - 0.0035 ** 2) * cfm28, 0.25) / Math.sqrt(points.length)
  const expandedUncertainty = Math.hypot(common, scatter)
  return {
    cfm28,
    expandedUncertainty,
    trace: [
      { what: 'lift through the opening', sum: `${maxLiftMm} x sin^2(angle), no flow at no lift, straight lines through ${points.length} readings`, gives: `0 to ${Math.min(maxLiftMm, last.liftMm)} mm` },
      { what: 'mean over the open angle', sum: `trapezium, ${panels} steps of half the curve`, gives: `${cfm28.toFixed(2)} cfm` },
    ],
  }
}

/** Flow at a lift on the straight lines from no flow at no lift through the points. */
function straightLine(points: FlowRun['points'], liftMm: number): number {
  let [fromLift, fromFlow] = [0, 0]
  for (const point of points) {
    if (liftMm <= point.liftMm) return fromFlow + (point.cfm28 - fromFlow) * (liftMm - fromLift) / (point.liftMm - fromLift)
    fromLift = point.liftMm
    fromFlow = point.cfm28
  }
  return fromFlow
}
