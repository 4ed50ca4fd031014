import type { TraceStep } from '../uncertainty/evaluated'
import type { FlowRun } from './flow-run'

/** Where the low end of the curve meets no flow. */
export interface LiftZero {
  /** Above zero the dial was zeroed on a valve that was not home; below, air passes that did not pass the valve. */
  liftMm: number
  /** Where the line meets no lift: the flow a leak would explain. */
  flowAtZeroCfm: number
  trace: TraceStep[]
}

/**
 * The line through the two lowest lifts, followed down to no flow.
 *
 * Only where both lie low enough for flow to rise in a straight line, under 0.12 of the valve diameter; else null.
 *
 * Units: mm; mm and cfm at the one basis.
 * Source: handbook 4.4.
 *
 * @throws {RangeError} when the valve diameter is not above zero
 */
export function liftZero(run: FlowRun, valveMm: number | null): LiftZero | null {
  if (valveMm !== null && !(valveMm > 0)) throw new RangeError('liftZero requires a valve diameter above zero')
  const [first, second] = run.points
  if (!first || !second) return null
  if (valveMm !== null && second.liftMm > 0.12 * valveMm) return null
  const slope = (second.cfm28 - first.cfm28) / (second.liftMm - first.liftMm)
  if (!(slope > 0)) return null
  const liftMm = first.liftMm - first.cfm28 / slope
  return {
    liftMm,
    flowAtZeroCfm: -slope * liftMm,
    trace: [
      { what: 'rise between the two lowest lifts', sum: `(${second.cfm28.toFixed(2)} - ${first.cfm28.toFixed(2)}) / (${second.liftMm.toFixed(2)} - ${first.liftMm.toFixed(2)})`, gives: `${slope.toFixed(2)} cfm a mm` },
      { what: 'lift at which the line meets no flow', sum: `${first.liftMm.toFixed(2)} - ${first.cfm28.toFixed(2)} / ${slope.toFixed(2)}`, gives: `${liftMm.toFixed(2)} mm` },
    ],
  }
}
