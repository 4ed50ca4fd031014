import type { FlowRun } from './flow-run'

/** How the test pressure held over a run. */
export interface PressureSteadiness {
  /** (greatest - least) / greatest, per cent. */
  driftPercent: number
  greatestPa: number
  leastPa: number
  /** Lifts whose pressure is more than 2 % under the greatest, rising, mm. */
  saggedLiftsMm: number[]
  /** True where those lifts are the topmost of the run: the bench ran out of breath. */
  onlyTop: boolean
}

/**
 * Drift of the test pressure over a run; null where the sheet has no pressure column.
 *
 * Units: Pa, per cent, mm.
 * Source: handbook 3.5 (bench limit: sags over 2 %).
 */
export function pressureSteadiness(run: FlowRun): PressureSteadiness | null {
  const read = run.points.flatMap(point => point.pressurePa === null ? [] : [{ liftMm: point.liftMm, pressurePa: point.pressurePa }])
  if (read.length < 2) return null
  const pressures = read.map(point => point.pressurePa)
  const greatestPa = Math.max(...pressures)
  const leastPa = Math.min(...pressures)
  const sagged = read.map(point => point.pressurePa < 0.98 * greatestPa)
  const from = sagged.indexOf(true)
  return {
    driftPercent: 100 * (greatestPa - leastPa) / greatestPa,
    greatestPa,
    leastPa,
    saggedLiftsMm: read.filter((_, i) => sagged[i]).map(point => point.liftMm),
    onlyTop: from > 0 && sagged.slice(from).every(Boolean),
  }
}
