import { convert } from '#shared/domain/units/convert'

export interface CurvePoint { liftMm: number, cfm28: number, expandedUncertainty: number }
/** One line of a plot: what the server calls a run of a curve set. */
export interface CurveRun { label: string, points: readonly CurvePoint[], missing: readonly { liftMm: number, reason: string }[] }
export interface CurveChange { liftMm: number, cfm: number, expandedUncertainty: number, percent: number, verdict: 'gain' | 'loss' | 'no clear change' }

/** Two lifts nearer than this are the same stop of the micrometer: no sheet steps finer. */
const sameLiftMm = 0.02
export const isSameLift = (one: number, other: number): boolean => Math.abs(one - other) < sameLiftMm

/** Every lift any run has or lacks, rising, each once. */
export function liftsOf(runs: readonly Pick<CurveRun, 'points' | 'missing'>[]): number[] {
  const all = runs.flatMap(run => [...run.points, ...run.missing].map(point => point.liftMm)).sort((a, b) => a - b)
  return all.filter((lift, at) => at === 0 || !isSameLift(lift, all[at - 1] ?? -Infinity))
}

/** Points in order of lift with the missing lifts among them as null, so that a line breaks there and is not drawn across what nobody read. */
export function withGaps(run: Pick<CurveRun, 'points' | 'missing'>): (CurvePoint | null)[] {
  const lifts = [...run.points.map(point => ({ lift: point.liftMm, point: point as CurvePoint | null })), ...run.missing.map(gap => ({ lift: gap.liftMm, point: null }))]
  return lifts.sort((a, b) => a.lift - b.lift).map(entry => entry.point)
}

/** The lift nearest to a place on the axis; null when there is none at all. */
export function nearestLift(lifts: readonly number[], to: number): number | null {
  return lifts.reduce<number | null>((best, lift) => best === null || Math.abs(lift - to) < Math.abs(best - to) ? lift : best, null)
}

/** A lift in both units, as a sheet heads its rows: "7.62 mm (0.300 in)". */
export function liftWords(liftMm: number): string {
  return `${Number(liftMm.toFixed(2))} mm (${convert(liftMm, 'mm', 'in').toFixed(3)} in)`
}

/** What one run says at one lift: "125.8 ± 0.9 cfm", or why it says nothing. */
export function readAt(run: CurveRun, liftMm: number): string {
  const point = run.points.find(one => isSameLift(one.liftMm, liftMm))
  if (point) return `${point.cfm28.toFixed(1)} ± ${point.expandedUncertainty.toFixed(1)} cfm`
  const gap = run.missing.find(one => isSameLift(one.liftMm, liftMm))
  return gap ? `missing, ${gap.reason}` : 'not on this sheet'
}

/** A change at one lift: "+2.4 ± 0.9 cfm (+3.1 %), gain". */
export function changeWords(change: CurveChange): string {
  const sign = (value: number, digits: number) => `${value > 0 ? '+' : ''}${value.toFixed(digits)}`.replace('-', '\u2212')
  return `${sign(change.cfm, 1)} ± ${change.expandedUncertainty.toFixed(1)} cfm (${sign(change.percent, 1)} %), ${change.verdict}`
}
