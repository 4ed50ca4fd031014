import type { CastingCard } from '../../geometry/casting'
import { benchRangeUsed } from '../bench-range-used'
import { curtainCoefficient } from '../curtain-coefficient'
import { curveResiduals } from '../curve-residuals'
import { cylinderSpread } from '../cylinder-spread'
import { digitExchange } from '../digit-exchange'
import type { FlowRun, SheetHeader } from '../flow-run'
import { leakCheck } from '../leak-check'
import { liftZero } from '../lift-zero'
import { plateDifference } from '../plate-difference'
import { pressureSteadiness } from '../pressure-steadiness'
import { ratioToUsual } from '../ratio-to-usual'
import { referenceBasis } from '../reference-basis'
import { smallestOpeningCoefficient } from '../smallest-opening-coefficient'
import type { ReducedRun } from './reduce-runs'
import type { SheetFinding } from './sheet-reading'

/** What the finders may hold a sheet against. */
export interface FaultContext {
  header: SheetHeader
  /** Zero-lift row at the one basis; null without one. */
  zeroRowCfm28: number | null
  casting: CastingCard | null
  baseline: SheetHeader | null
}

/** Land along the seat face where the sheet is silent: what the school leaves after bowl work. School design value. */
const usualLandMm = 1.65

/** Limits of the finders. Source: handbook 3.5 and 4.4, common practice and school design values. */
const limits = {
  coefficient: { impossible: 1, high: 0.97, curtainHigh: 0.75, lowLiftLeast: 0.65 },
  liftZeroMm: 0.15,
  rangePercent: 97,
  platePercent: 1.5,
  spreadPercent: 2.5,
}

/**
 * Looks a reduced sheet over for what students and benches get wrong. Nothing is repaired; each finding says what was seen and
 * what to do about it.
 */
export function findSheetFaults(reduced: readonly ReducedRun[], context: FaultContext): SheetFinding[] {
  return [
    ...plateFindings(context.header),
    ...setupFindings(context),
    ...reduced.flatMap(one => runFindings(one, reduced.length > 1, context)),
    ...spreadFindings(reduced.map(one => one.run), context),
  ]
}

function runFindings(reduced: ReducedRun, named: boolean, context: FaultContext): SheetFinding[] {
  const { run } = reduced
  const who = named && run.cylinder !== null ? `Cylinder ${run.cylinder}${run.side ? ` ${run.side}` : ''}: ` : ''
  const found = [
    ...missingFindings(reduced, context),
    ...leakFindings(run, context),
    ...coefficientFindings(run, context),
    ...pressureFindings(reduced),
    ...curveFindings(reduced, context),
    ...usualFindings(run, context),
  ]
  return found.map(finding => ({ ...finding, text: who + finding.text, lifts: finding.lifts.map(lift => Math.round(lift * 1000) / 1000) }))
}

function missingFindings({ run, series }: ReducedRun, { casting }: FaultContext): SheetFinding[] {
  const inMean = run.missing.map((gap): SheetFinding => ({ code: 'missing-point', severity: 'ask', lifts: [gap.liftMm], text: `No reading at ${lift(gap.liftMm)}: ${gap.reason}. Take it, or say why it must stay open; it is never filled in.` }))
  const inOneRun = series.length < 2
    ? []
    : series.flatMap((one, i) => one.missing.filter(gap => !run.missing.includes(gap)).map((gap): SheetFinding => ({
        code: 'missing-point', severity: 'note', lifts: [gap.liftMm], text: `No reading at ${lift(gap.liftMm)} in run ${one.run ?? i + 1}; the mean there is of the other runs.`,
      })))
  const absent = rowsLeftOut(run, casting).map((liftMm): SheetFinding => ({ code: 'missing-point', severity: 'ask', lifts: [liftMm], text: `There is no row at ${lift(liftMm)} though the lifts around it are there. Take it, or say why it must stay open.` }))
  return [...inMean, ...inOneRun, ...absent]
}

/** Lifts of an even ladder, or of the casting card where the sheet follows it, that have no row at all. */
export function rowsLeftOut(run: FlowRun, casting: CastingCard | null): number[] {
  const lifts = [...run.points.map(point => point.liftMm), ...run.missing.map(gap => gap.liftMm)].sort((a, b) => a - b)
  const has = (wanted: number) => lifts.some(one => Math.abs(one - wanted) <= 0.03)
  const card = casting?.test_lifts_in?.map(inches => inches * 25.4) ?? casting?.test_lifts_mm ?? []
  const onCard = card.filter(has).length
  const fromCard = onCard >= 5 && onCard >= card.length / 2 ? card.filter(wanted => !has(wanted)) : []
  if (fromCard.length > 0 || lifts.length < 5) return fromCard
  const steps = lifts.slice(1).map((one, i) => one - (lifts[i] as number))
  const step = Math.min(...steps)
  if (!(step > 0.2) || !steps.every(one => Math.abs(one / step - Math.round(one / step)) < 0.04)) return []
  const even = steps.filter(one => Math.round(one / step) === 1).length
  if (even < steps.length - 2) return []
  return steps.flatMap((one, i) => Array.from({ length: Math.round(one / step) - 1 }, (_, n) => (lifts[i] as number) + step * (n + 1)))
}

function leakFindings(run: FlowRun, { header, zeroRowCfm28 }: FaultContext): SheetFinding[] {
  const [lowest] = run.points
  const findings: SheetFinding[] = []
  if (!lowest) return findings
  const leak = header.leakCfm28
  const zero = liftZero(run, header.valveMm)
  if (leak !== null && leakCheck(leak, lowest.cfm28).state !== 'accept') {
    const { state, shareOfLowestPercent } = leakCheck(leak, lowest.cfm28)
    const where = zeroRowCfm28 === leak ? 'The zero-lift row reads' : 'With the valve shut the bench reads'
    const rest = state === 'reject' ? 'That size of leak is cured, not taken off: clay, gasket, plug or seat, then rerun.' : 'It was taken off; grease the seat and look again if there is time.'
    findings.push({ code: 'leak-large', severity: state === 'reject' ? 'refuse' : 'ask', lifts: [0], text: `${where} ${leak.toFixed(1)} cfm at 28 inH2O, ${shareOfLowestPercent.toFixed(0)} % of the lowest lift. ${rest}` })
  }
  // Only where the two lifts lie so low that the curve itself has not begun to bend.
  else if (zero && zero.liftMm < -limits.liftZeroMm && zero.flowAtZeroCfm > 1.5 && (run.points[1]?.liftMm ?? Infinity) <= 0.08 * (header.valveMm ?? 0)) {
    findings.push({ code: 'leak-in-curve', severity: 'ask', lifts: [lowest.liftMm], text: `The line through the two lowest lifts still shows ${zero.flowAtZeroCfm.toFixed(1)} cfm at no lift (it meets no flow at ${zero.liftMm.toFixed(2)} mm). Air passes that did not pass the valve: look for a leak, then zero the dial again.` })
  }
  if (zero && zero.liftMm > limits.liftZeroMm) {
    findings.push({ code: 'lift-zero-off', severity: 'ask', lifts: run.points.slice(0, 3).map(point => point.liftMm), text: `The line through the two lowest lifts meets no flow at +${zero.liftMm.toFixed(2)} mm (${(zero.liftMm / 25.4).toFixed(3)} in): the dial was zeroed on a valve that was not home. Seat the valve, zero again and rerun.` })
  }
  return findings
}

function coefficientFindings(run: FlowRun, { header, casting }: FaultContext): SheetFinding[] {
  const { valveMm, stemMm } = header
  if (valveMm === null) return []
  const seatOuterMm = run.side && casting ? Math.min(casting.valves[run.side].seat_od, valveMm) : valveMm
  const seatDeg = header.seatDeg ?? 45
  const seatWidthMm = (header.landMm ?? usualLandMm) * Math.cos(seatDeg * Math.PI / 180)
  const opening = (cfm28: number, liftMm: number): number | null => {
    if (stemMm === null) return null
    try {
      return smallestOpeningCoefficient(cfm28, { seatOuterMm, stemMm, seatWidthMm, seatDeg, throatMm: header.throatMm }, liftMm)
    }
    catch {
      // Sizes that cannot be a valve are reported as such elsewhere; here there is nothing to compute.
      return null
    }
  }
  const rows = run.points.map(point => ({ liftMm: point.liftMm, curtain: curtainCoefficient(point.cfm28, valveMm, point.liftMm), opening: opening(point.cfm28, point.liftMm) }))
  const over = rows.filter(row => row.curtain > limits.coefficient.impossible || (row.opening ?? 0) > limits.coefficient.impossible)
  if (over.length > 0) {
    const curtain = Math.max(...rows.map(row => row.curtain))
    const least = Math.max(...rows.map(row => row.opening ?? 0))
    return [{ code: 'coefficient-over-one', severity: 'refuse', lifts: over.map(row => row.liftMm), text: `More air than a perfect nozzle would pass: coefficient up to ${least > 0 ? `${least.toFixed(2)} on the smallest opening, ` : ''}${curtain.toFixed(2)} on the curtain. Wrong pressure, wrong valve size, a leak, or brought to 28 inH2O twice.${twiceHint(run, casting, header)} Put it right at the source and read it in again.` }]
  }
  const findings: SheetFinding[] = []
  const high = rows.filter(row => (row.opening ?? 0) > limits.coefficient.high || (row.curtain > limits.coefficient.curtainHigh && row.liftMm < 0.1 * valveMm))
  if (high.length > 0) findings.push({ code: 'coefficient-high', severity: 'ask', lifts: high.map(row => row.liftMm), text: `Coefficient ${Math.max(...high.map(row => row.opening ?? row.curtain)).toFixed(2)} at ${high.map(row => lift(row.liftMm)).join(', ')}: right up against the ceiling. Check leak and lift zero.` })
  const low = rows.filter(row => row.liftMm <= 0.12 * valveMm && row.opening !== null)
  const best = Math.max(...low.map(row => row.opening as number))
  if (low.length > 0 && best < limits.coefficient.lowLiftLeast) {
    findings.push({ code: 'low-lift-coefficient-small', severity: 'ask', lifts: low.map(row => row.liftMm), text: `Coefficient on the smallest opening only ${best.toFixed(2)} near the seat, where 0.8 to 0.95 is usual: wrong pressure, wrong range or wrong unit.` })
  }
  return findings
}

/** Where every lift is too large by one conversion, say so: a hint, not a correction. */
function twiceHint(run: FlowRun, casting: CastingCard | null, header: SheetHeader): string {
  const usual = usualCurve(run, casting, header)
  const ratio = usual ? ratioToUsual(run, usual, referenceBasis.pressurePa) : null
  if (!ratio || ratio.spreadPercent > 3) return ''
  const from = [10, 15, 20, 25].find(inches => Math.abs(ratio.mean / Math.sqrt(28 / inches) - 1) < 0.03)
  return from === undefined ? '' : ` Every lift is ${ratio.mean.toFixed(2)} times this casting's usual, and sqrt(28/${from}) is ${Math.sqrt(28 / from).toFixed(2)}.`
}

function pressureFindings({ run, series }: ReducedRun): SheetFinding[] {
  const findings: SheetFinding[] = []
  const steady = pressureSteadiness(run)
  if (steady && steady.saggedLiftsMm.length > 0) {
    const range = `${(steady.greatestPa / 249.08891).toFixed(1)} to ${(steady.leastPa / 249.08891).toFixed(1)} inH2O`
    findings.push({ code: 'pressure-sag', severity: 'note', lifts: steady.saggedLiftsMm, text: steady.onlyTop ? `Pressure falls from ${range} at the top lifts: the bench ran out of breath. Each row was brought to 28 inH2O from its own pressure; or rerun the whole curve lower.` : `Pressure moves from ${range} over the run. Each row was brought to 28 inH2O from its own pressure; set it again at every lift.` })
  }
  const used = benchRangeUsed(series.flatMap(one => one.points.flatMap(point => point.fraction === null ? [] : [{ liftMm: point.liftMm, fraction: point.fraction }])))
  if (used && used.percent > limits.rangePercent) {
    findings.push({ code: 'bench-limit', severity: 'ask', lifts: [used.liftMm], text: `${used.percent.toFixed(0)} % of the range used at ${lift(used.liftMm)}: the gauge was on its stop. That is the bench, not the port.` })
  }
  return findings
}

function curveFindings({ run, series }: ReducedRun, { header }: FaultContext): SheetFinding[] {
  const findings: SheetFinding[] = []
  run.points.forEach((point, i) => {
    const before = run.points[i - 1]
    if (before && before.cfm28 - point.cfm28 > Math.hypot(before.expandedUncertainty, point.expandedUncertainty)) {
      findings.push({ code: 'not-rising', severity: 'ask', lifts: [point.liftMm], text: `Flow falls from ${before.cfm28.toFixed(1)} to ${point.cfm28.toFixed(1)} cfm at ${lift(point.liftMm)}. Look in the notebook and take that lift again.` })
    }
  })
  for (const residual of curveResiduals(run).filter(one => one.offCurve)) {
    const raw = series.length === 1 ? series[0]?.points.find(point => point.liftMm === residual.liftMm) : undefined
    // Back from the one basis to the figure as written: the same factor takes both there.
    const perBasis = raw ? raw.flowCfm * raw.writtenPerCfm / residual.cfm28 : 0
    const point = run.points.find(one => one.liftMm === residual.liftMm)
    const swapped = raw && raw.written !== '' && point ? digitExchange(raw.written, residual.expectedCfm28 * perBasis, Math.max(1.5 * point.expandedUncertainty, 0.01 * residual.expectedCfm28) * perBasis) : null
    const closer = swapped !== null && Math.abs(Number(swapped.replace(',', '.')) / perBasis - residual.expectedCfm28) < Math.abs(residual.residualCfm) / 3
    findings.push({
      code: 'point-off-curve', severity: 'ask', lifts: [residual.liftMm],
      text: `${residual.residualCfm > 0 ? '+' : ''}${residual.residualCfm.toFixed(1)} cfm (${residual.percent.toFixed(1)} %) off the curve through the others at ${lift(residual.liftMm)}.${closer ? ` Two digits exchanged would put it back: did you mean ${swapped} for ${raw?.written ?? ''}?` : ''} Look in the notebook and take that lift again; do not just alter the sheet.`,
    })
  }
  const { valveMm } = header
  if (valveMm !== null) {
    const outside = run.points.filter(point => point.liftMm / valveMm > 0.6 || point.liftMm / valveMm < 0.01)
    if (outside.length > 0) findings.push({ code: 'lift-out-of-bounds', severity: 'refuse', lifts: outside.map(point => point.liftMm), text: `A lift of ${lift((outside[outside.length - 1] as { liftMm: number }).liftMm)} on a ${valveMm.toFixed(1)} mm valve cannot be. Check the unit of the lift and of the valve.` })
  }
  return findings
}

function usualCurve(run: FlowRun, casting: CastingCard | null, header: SheetHeader): { liftMm: readonly number[], cfm28: readonly number[] } | null {
  const side = run.side ?? null
  if (!casting || !side || !header.stage) return null
  const stage = header.stage === 'final' ? 'short' : header.stage
  return { liftMm: casting.usual_flow.lift_mm, cfm28: casting.usual_flow[side][stage] }
}

function usualFindings(run: FlowRun, { header, casting }: FaultContext): SheetFinding[] {
  const usual = usualCurve(run, casting, header)
  if (!usual) return []
  const ratio = ratioToUsual(run, usual, header.pressurePa ?? referenceBasis.pressurePa)
  if (!ratio?.pressure) return []
  const { usedInH2O, ratioExpected } = ratio.pressure
  const said = (header.pressurePa ?? referenceBasis.pressurePa) / 249.08891
  return [{
    code: 'wrong-pressure', severity: 'refuse', lifts: ratio.perLift.map(one => one.liftMm),
    text: `Every lift is ${ratio.mean.toFixed(3)} of this casting's usual curve (± ${ratio.spreadPercent.toFixed(1)} %), and sqrt(${usedInH2O}/${said.toFixed(0)}) is ${ratioExpected.toFixed(3)}: was this run at ${usedInH2O} inH2O and not at ${said.toFixed(0)}? A port never scales every lift alike. Say which pressure it was, or rerun.`,
  }]
}

function plateFindings(header: SheetHeader): SheetFinding[] {
  if (!header.plateGiven) return [{ code: 'no-plate', severity: 'note', lifts: [], text: 'The sheet gives no plate reading; the bench is taken as reading true. The plate log of the day may say more.' }]
  const percent = plateDifference(header.plateRatio, 1)
  if (Math.abs(percent) <= limits.platePercent) return []
  return [{ code: 'plate-out', severity: 'refuse', lifts: [], text: `The bench is ${Math.abs(percent).toFixed(1)} % ${percent > 0 ? 'over' : 'under'} its plate: more than is corrected. Find out why (door, gasket, hose, gauge zero) and rerun.` }]
}

function setupFindings({ header, baseline }: FaultContext): SheetFinding[] {
  if (!baseline) return []
  const differs: string[] = []
  const compare = (name: string, before: string | null, now: string | null) => {
    if (before !== null && now !== null && fold(before) !== fold(now)) differs.push(`${name}: baseline '${plain(before)}', this run '${plain(now)}'`)
  }
  compare('pipe', baseline.pipe, header.pipe)
  compare('entry', baseline.entry, header.entry)
  compare('bench', baseline.bench, header.bench)
  const sizes: [string, number | null, number | null, number][] = [['valve', baseline.valveMm, header.valveMm, 0.06], ['stem', baseline.stemMm, header.stemMm, 0.1], ['seat angle', baseline.seatDeg, header.seatDeg, 0.5]]
  for (const [name, before, now, tolerance] of sizes) {
    if (before !== null && now !== null && Math.abs(before - now) > tolerance) differs.push(`${name}: baseline ${before.toFixed(2)}, this run ${now.toFixed(2)}`)
  }
  if (differs.length === 0) return []
  return [{ code: 'setup-differs', severity: 'ask', lifts: [], text: `The set-up is not the baseline's (${differs.join('; ')}). No gain over that baseline counts until one of the two is repeated alike.` }]
}

function spreadFindings(runs: readonly FlowRun[], { header }: FaultContext): SheetFinding[] {
  const { valveMm } = header
  const sides = new Set(runs.map(run => run.side))
  if (valveMm === null || runs.length < 2 || sides.size !== 1 || runs.some(run => run.cylinder === null)) return []
  const { worst, deviations } = cylinderSpread(runs, valveMm)
  const [furthest] = [...deviations].sort((a, b) => Math.abs(b.percent) - Math.abs(a.percent))
  if (!worst || worst.percent <= limits.spreadPercent || !furthest) return []
  return [{ code: 'cylinder-spread', severity: 'note', lifts: [Math.round(worst.liftMm * 1000) / 1000], text: `The cylinders are ${worst.percent.toFixed(1)} % apart at ${lift(worst.liftMm)}; cylinder ${furthest.cylinder} is ${furthest.percent.toFixed(1)} % from the middle of the set above 0.12 of the valve diameter.` }]
}

function fold(text: string): string {
  const plainer = text.toLowerCase().replace(/[^\p{L}\d.,]+/gu, ' ').trim()
  return /^(?:|n a|na|none|no|without|off)$/.test(plainer) ? 'none' : plainer
}

function plain(text: string): string {
  return fold(text) === 'none' ? 'none' : text
}

function lift(liftMm: number): string {
  return `${liftMm.toFixed(2)} mm (${(liftMm / 25.4).toFixed(3)} in)`
}
