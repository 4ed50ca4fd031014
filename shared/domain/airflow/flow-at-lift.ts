import type { FlowRun } from './flow-run'
import { pchip } from './pchip'

/** Flow of a run at a lift, and how it was had. */
export interface FlowAtLift {
  liftMm: number
  cfm28: number
  expandedUncertainty: number
  how: 'read' | 'interpolated' | 'nearest'
}

/** Lifts closer than this are the same lift: 0.050 in and 1.27 mm, or 3.8 for 3.81. */
const sameLiftMm = 0.02

/**
 * Flow of a run at any lift inside it.
 *
 * A lift on the sheet is read. Between two it is interpolated on effective area, which at the one basis is proportional to flow,
 * by a curve that starts from no flow at no lift. Where the sheet ends short of the lift, its last lift is used if it is within
 * 2 % of the one wanted, else there is no answer: null. Below the lowest lift the curve is trusted down to half of it.
 *
 * Units: mm; cfm at the one basis.
 * Source: handbook 3 (lift rule) and 3.5.
 *
 * @throws {RangeError} when the lift is not above zero, or the run has no points
 */
export function flowAtLift(run: FlowRun, liftMm: number): FlowAtLift | null {
  if (!(liftMm > 0) || !Number.isFinite(liftMm)) throw new RangeError('flowAtLift requires a lift above zero')
  const { points } = run
  const [lowest] = points
  const highest = points[points.length - 1]
  if (!lowest || !highest) throw new RangeError('flowAtLift requires a run with points')

  const same = points.find(point => Math.abs(point.liftMm - liftMm) <= sameLiftMm)
  if (same) return { liftMm: same.liftMm, cfm28: same.cfm28, expandedUncertainty: same.expandedUncertainty, how: 'read' }
  if (liftMm > highest.liftMm) {
    if (liftMm - highest.liftMm > 0.02 * liftMm) return null
    return { liftMm: highest.liftMm, cfm28: highest.cfm28, expandedUncertainty: highest.expandedUncertainty, how: 'nearest' }
  }
  if (liftMm < lowest.liftMm / 2) return null
  const lifts = [0, ...points.map(point => point.liftMm)]
  const cfm28 = pchip(lifts, [0, ...points.map(point => point.cfm28)]).at(liftMm)
  // A value between two readings is no better known than the readings beside it.
  const above = points.find(point => point.liftMm > liftMm) ?? highest
  const below = [...points].reverse().find(point => point.liftMm < liftMm) ?? lowest
  const expandedUncertainty = Math.max(above.expandedUncertainty * cfm28 / above.cfm28, below.expandedUncertainty)
  return { liftMm, cfm28, expandedUncertainty, how: 'interpolated' }
}
