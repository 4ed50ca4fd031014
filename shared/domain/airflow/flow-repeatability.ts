import { pooledStandardDeviation } from '../uncertainty/pooled-standard-deviation'
import type { FlowRun } from './flow-run'

/** How steady repeated set-ups are. */
export interface FlowRepeatability {
  /** One standard deviation, per cent of the mean at each lift, pooled over lifts. */
  percent: number
  /** 2.8 s: two runs differ by more than this once in twenty times. */
  limitPercent: number
  degreesOfFreedom: number
}

/**
 * Repeatability of runs of one port, pooled over the lifts they share; null when no lift was read twice.
 *
 * Every reading is taken at the one basis first, as a percentage of the mean at its lift. Each lift counts once, however many of
 * its repeats were missed: a lift is one spot of the curve, and the school's figure (0.42 % on its practice sheet) is made so.
 *
 * Source: ISO 5725-2 and -6, r = 2.8 s (from memory); handbook 8.10.
 *
 * @throws {RangeError} with no runs
 */
export function flowRepeatability(runs: readonly FlowRun[]): FlowRepeatability | null {
  const [first] = runs
  if (!first) throw new RangeError('flowRepeatability requires runs')
  const groups = new Map<number, number[]>()
  for (const point of runs.flatMap(run => run.points)) {
    // Two hundredths of a millimetre apart is the same lift.
    const key = [...groups.keys()].find(lift => Math.abs(lift - point.liftMm) <= 0.02) ?? point.liftMm
    groups.set(key, [...(groups.get(key) ?? []), point.cfm28])
  }
  const relative = [...groups.values()].filter(group => group.length > 1).map((group) => {
    const mean = group.reduce((sum, value) => sum + value, 0) / group.length
    return group.map(value => 100 * value / mean)
  })
  if (relative.length === 0) return null
  const { degreesOfFreedom } = pooledStandardDeviation(relative)
  const percent = Math.sqrt(relative.reduce((sum, group) => sum + pooledStandardDeviation([group]).standardDeviation ** 2, 0) / relative.length)
  return { percent, limitPercent: 2.8 * percent, degreesOfFreedom }
}
