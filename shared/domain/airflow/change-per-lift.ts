import type { TraceStep } from '../uncertainty/evaluated'
import { flowAtLift } from './flow-at-lift'
import type { FlowRun } from './flow-run'

/** Change of flow at one lift. */
export interface LiftChange {
  liftMm: number
  nowCfm28: number
  beforeCfm28: number
  changeCfm: number
  /** k = 2. */
  expandedUncertainty: number
  changePercent: number
  /** k = 2, of the percentage. */
  expandedUncertaintyPercent: number
  verdict: 'gain' | 'loss' | 'no clear change'
  trace: TraceStep[]
}

/**
 * Change of flow at each lift of a run against an earlier run of the same port on the same bench.
 *
 * Each reading carries its own doubt; the two are combined in quadrature. Where the lifts differ the earlier run is interpolated
 * (`flowAtLift`). A lift the earlier run cannot answer for is left out. Neighbouring changes share a reading with the stage before,
 * so changes of several stages must not be summed in quadrature: take first and last.
 *
 * Units: mm, cfm at the one basis, per cent.
 * Source: handbook 2.0, 3.2, 8.7.
 *
 * @throws {RangeError} when either run has no points
 */
export function changePerLift(now: FlowRun, before: FlowRun): LiftChange[] {
  if (now.points.length === 0) throw new RangeError('changePerLift requires a run with points')
  return now.points.flatMap((point) => {
    const earlier = flowAtLift(before, point.liftMm)
    return earlier === null ? [] : [changeBetween(point.liftMm, point, earlier)]
  })
}

/**
 * Change at one lift that may not be on either sheet, such as a named lift; null where either run cannot answer for it.
 *
 * @throws {RangeError} as `flowAtLift`
 */
export function changeAtLift(now: FlowRun, before: FlowRun, liftMm: number): LiftChange | null {
  const later = flowAtLift(now, liftMm)
  if (later === null) return null
  // Compared at the lift the later run was really read at: near the top the nearest lift may stand in.
  const earlier = flowAtLift(before, later.liftMm)
  return earlier === null ? null : changeBetween(later.liftMm, later, earlier)
}

interface Reading { cfm28: number, expandedUncertainty: number }

function changeBetween(liftMm: number, now: Reading, before: Reading): LiftChange {
  if (!(before.cfm28 > 0)) throw new RangeError('a change requires an earlier flow above zero')
  const changeCfm = now.cfm28 - before.cfm28
  const expandedUncertainty = Math.hypot(now.expandedUncertainty, before.expandedUncertainty)
  const ratio = now.cfm28 / before.cfm28
  const changePercent = 100 * (ratio - 1)
  const expandedUncertaintyPercent = 100 * ratio * Math.hypot(now.expandedUncertainty / now.cfm28, before.expandedUncertainty / before.cfm28)
  const verdict = changeCfm > expandedUncertainty ? 'gain' : changeCfm < -expandedUncertainty ? 'loss' : 'no clear change'
  return {
    liftMm,
    nowCfm28: now.cfm28,
    beforeCfm28: before.cfm28,
    changeCfm,
    expandedUncertainty,
    changePercent,
    expandedUncertaintyPercent,
    verdict,
    trace: [
      { what: 'change of flow', sum: `${now.cfm28.toFixed(2)} - ${before.cfm28.toFixed(2)}`, gives: `${changeCfm.toFixed(2)} cfm (${changePercent.toFixed(1)} %)` },
      { what: 'doubt of the change, k = 2', sum: `sqrt(${now.expandedUncertainty.toFixed(2)}^2 + ${before.expandedUncertainty.toFixed(2)}^2)`, gives: `${expandedUncertainty.toFixed(2)} cfm` },
    ],
  }
}
