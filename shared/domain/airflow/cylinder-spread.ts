import { median } from '../uncertainty/median'
import { flowAtLift } from './flow-at-lift'
import type { FlowRun } from './flow-run'

/** Cylinders of one head against each other. */
export interface CylinderSpread {
  /** (max - min) / mean at each lift every cylinder has, per cent. */
  perLift: { liftMm: number, percent: number }[]
  /** The widest above 0.12 D; null when no lift lies there. */
  worst: { liftMm: number, percent: number } | null
  /** Mean deviation of each cylinder from the middle of the set above 0.12 D, per cent. */
  deviations: { cylinder: number, percent: number }[]
}

/**
 * Spread between cylinders, one run each, one session.
 *
 * Units: mm, per cent. `valveMm` tells where 0.12 D lies: below it a hair of lift zero makes a spread that is no port's.
 * Source: handbook 3.5.
 *
 * @throws {RangeError} with fewer than two runs, a run without a cylinder, two of one cylinder, or a valve not above zero
 */
export function cylinderSpread(runs: readonly FlowRun[], valveMm: number): CylinderSpread {
  if (!(valveMm > 0)) throw new RangeError('cylinderSpread requires a valve diameter above zero')
  const cylinders = runs.map(run => run.cylinder)
  if (runs.length < 2 || cylinders.includes(null) || new Set(cylinders).size !== runs.length) throw new RangeError('cylinderSpread requires at least two runs, each of another cylinder')

  const lifts = (runs[0] as FlowRun).points.map(point => point.liftMm)
  const shared = lifts.flatMap((liftMm) => {
    const flows = runs.map(run => flowAtLift(run, liftMm))
    return flows.every(flow => flow !== null) ? [{ liftMm, flows: flows.map(flow => flow.cfm28) }] : []
  })
  const perLift = shared.map(({ liftMm, flows }) => {
    const mean = flows.reduce((sum, flow) => sum + flow, 0) / flows.length
    return { liftMm, percent: 100 * (Math.max(...flows) - Math.min(...flows)) / mean }
  })
  const above = 0.12 * valveMm
  const [worst] = perLift.filter(({ liftMm }) => liftMm > above).sort((a, b) => b.percent - a.percent)
  const high = shared.filter(({ liftMm }) => liftMm > above)
  const deviations = runs.map((run, i) => ({
    cylinder: run.cylinder as number,
    percent: high.length === 0 ? 0 : high.reduce((sum, { flows }) => sum + 100 * ((flows[i] as number) / median(flows) - 1), 0) / high.length,
  }))
  return { perLift, worst: worst ?? null, deviations }
}
