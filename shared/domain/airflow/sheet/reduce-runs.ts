import { flowToOneBasis } from '../flow-to-one-basis'
import { flowUncertainty } from '../flow-uncertainty'
import type { FlowPoint, FlowRun } from '../flow-run'
import type { RawSeries } from './read-series'
import type { Side } from '../../units/port'

/** What every reading of a sheet shares on its way to the one basis. */
export interface Reduction {
  airDensity: number
  plateRatio: number
  /** Leak of the header with the pressure it was read at; null when the header gives none. */
  headerLeak: { flowCfm: number, pressurePa: number } | null
  cylinder: number | null
  side: Side | null
}

/** A run at the one basis beside the raw runs it came from. */
export interface ReducedRun { run: FlowRun, series: RawSeries[], singles: FlowPoint[][] }

/**
 * Brings every reading to the one basis and averages repeats of one port afterwards, never before: readings taken at slightly
 * different pressures have no mean.
 *
 * The leak taken off is the row's own where the sheet has a leak column, else the header's, else the zero-lift row's, each scaled
 * by the square root of pressure to the row. A leak that is larger than the reading leaves a missing point.
 */
export function reduceRuns(series: readonly RawSeries[], reduction: Reduction): ReducedRun[] {
  const ports = new Map<string, RawSeries[]>()
  for (const one of series) {
    const key = JSON.stringify([one.cylinder ?? reduction.cylinder, one.side ?? reduction.side])
    ports.set(key, [...(ports.get(key) ?? []), one])
  }
  return [...ports.values()].map((own) => {
    const [first] = own as [RawSeries]
    const singles = own.map(one => reduceSeries(one, reduction))
    const points = own.length === 1 ? singles[0] ?? [] : meanPoints(singles)
    const missing = own.flatMap(one => one.missing)
      .filter(gap => !points.some(point => Math.abs(point.liftMm - gap.liftMm) <= 0.02))
      .filter((gap, i, all) => all.findIndex(other => Math.abs(other.liftMm - gap.liftMm) <= 0.02) === i)
      .sort((a, b) => a.liftMm - b.liftMm)
    const run: FlowRun = { cylinder: first.cylinder ?? reduction.cylinder, side: first.side ?? reduction.side, points, missing }
    return { run: own.length > 1 ? { ...run, repeats: singles } : run, series: own, singles }
  })
}

function reduceSeries(series: RawSeries, { airDensity, plateRatio, headerLeak }: Reduction): FlowPoint[] {
  const leak = headerLeak ?? series.zero
  return series.points.flatMap((point) => {
    const leakCfm = point.leakCfm ?? (leak ? leak.flowCfm * Math.sqrt(point.flowPressurePa / leak.pressurePa) : 0)
    if (!(point.flowCfm > leakCfm)) {
      series.missing.push({ liftMm: point.liftMm, reason: 'the leak is larger than the reading' })
      return []
    }
    const { cfm28 } = flowToOneBasis({ flowCfm: point.flowCfm, leakCfm, pressurePa: point.flowPressurePa, airDensity, plateRatio })
    return [{ liftMm: point.liftMm, cfm28, expandedUncertainty: flowUncertainty(cfm28, 'change'), pressurePa: point.rowPressurePa, ...(point.fraction === null ? {} : { rangeShare: point.fraction }) }]
  })
}

function meanPoints(singles: readonly FlowPoint[][]): FlowPoint[] {
  const groups: FlowPoint[][] = []
  for (const point of singles.flat()) {
    const group = groups.find(([first]) => first !== undefined && Math.abs(first.liftMm - point.liftMm) <= 0.02)
    if (group) group.push(point)
    else groups.push([point])
  }
  return groups.map((group): FlowPoint => {
    const [first] = group as [FlowPoint]
    const mean = (of: (point: FlowPoint) => number) => group.reduce((sum, point) => sum + of(point), 0) / group.length
    const cfm28 = mean(point => point.cfm28)
    // The doubt stays that of one reading: most of it (bench, plate, lift dial) is common to the repeats.
    return { liftMm: first.liftMm, cfm28, expandedUncertainty: flowUncertainty(cfm28, 'change'), pressurePa: group.every(point => point.pressurePa !== null) ? mean(point => point.pressurePa as number) : null }
  }).sort((a, b) => a.liftMm - b.liftMm)
}
