import { curtainCoefficient } from '../../airflow/curtain-coefficient'
import { curveResiduals } from '../../airflow/curve-residuals'
import { cylinderSpread } from '../../airflow/cylinder-spread'
import { digitExchange } from '../../airflow/digit-exchange'
import { exhaustIntakeRatio as ratioOfRuns } from '../../airflow/exhaust-intake-ratio'
import { flowAtLift } from '../../airflow/flow-at-lift'
import { flowRepeatability } from '../../airflow/flow-repeatability'
import { leakCheck } from '../../airflow/leak-check'
import { liftZero as zeroOfRun } from '../../airflow/lift-zero'
import { pressureSteadiness } from '../../airflow/pressure-steadiness'
import { ratioToUsual } from '../../airflow/ratio-to-usual'
import { referenceBasis } from '../../airflow/reference-basis'
import { smallestOpeningCoefficient } from '../../airflow/smallest-opening-coefficient'
import { median } from '../../uncertainty/median'
import type { Evaluated, TraceStep } from '../../uncertainty/evaluated'
import type { Evaluator, JudgedUnit, NotAssessed } from '../evidence'
import { runOf, runsOf, type SheetRun, usualStage, valveHeadMm, valveOnSeat } from '../flow-evidence'
import { liftInWords, listInWords, unitInWords } from '../words'

const noSheet = (unit: JudgedUnit): NotAssessed => ({ notAssessed: `There is no flow sheet of this stage for ${unitInWords(unit)} yet.` })

function value(figures: { value: number, unit: string, liftMm?: number, at?: string, u?: number, trace: TraceStep[] }): Evaluated {
  return { value: figures.value, unit: figures.unit, standardUncertainty: figures.u ?? null, degreesOfFreedom: null, at: figures.at ?? null, liftMm: figures.liftMm ?? null, trace: figures.trace }
}

/** Scatter of the runs of one port, each from a fresh set-up, pooled over the lifts. Source: handbook 3.5. */
export const flowRepeat: Evaluator = (evidence, criterion, unit) => {
  const wanted = criterion.wants.find(want => want.kind === 'flow-sheet')?.count ?? 3
  const runs = runsOf(evidence, evidence.op, unit).flatMap(({ run }) => run.repeats === undefined ? [run] : run.repeats.map(points => ({ ...run, points })))
  if (runs.length === 0) return noSheet(unit)
  if (runs.length < wanted) return { notAssessed: `${runs.length} of ${wanted} runs of ${unitInWords(unit)}, each from a fresh set-up.` }
  const repeat = flowRepeatability(runs)
  if (!repeat) return { notAssessed: 'The runs have no lift in common.' }
  return {
    values: [value({ value: repeat.percent, unit: '%', trace: [
      { what: 'each reading as a percentage of the mean at its lift', sum: `${runs.length} runs`, gives: `${repeat.degreesOfFreedom} degrees of freedom` },
      { what: 'pooled standard deviation', sum: 'sqrt(sum (n - 1) s^2 / sum (n - 1))', gives: `${repeat.percent.toFixed(2)} %` },
      { what: 'repeat limit', sum: `2.8 x ${repeat.percent.toFixed(2)}`, gives: `${repeat.limitPercent.toFixed(1)} %` },
    ] })],
    fill: () => ({ limit: repeat.limitPercent.toFixed(1) }),
  }
}

/** Where the line through the two lowest lifts meets no flow. */
export const liftZero: Evaluator = (evidence, _criterion, unit) => {
  const now = runOf(evidence, evidence.op, unit)
  if (!now) return noSheet(unit)
  if (now.run.missing.length > 0) return { notAssessed: `A lift is missing from the sheet: ${listInWords(now.run.missing.map(one => liftInWords(one.liftMm)))}.` }
  const zero = zeroOfRun(now.run, valveHeadMm(evidence, now.sheet.header, unit.side ?? 'intake'))
  const [lowest] = now.run.points
  if (!zero || !lowest) return { notAssessed: 'The two lowest lifts are not low enough, or do not rise, so nothing can be said of the lift zero.' }
  return {
    values: [value({ value: zero.liftMm, unit: 'mm', trace: zero.trace })],
    fill: () => ({ share: (100 * Math.abs(zero.liftMm) / lowest.liftMm).toFixed(0) }),
  }
}

/** Flow with the valve shut, at the one basis. */
export const leak: Evaluator = (evidence, _criterion, unit) => {
  const now = runOf(evidence, evidence.op, unit)
  if (!now) return noSheet(unit)
  const { leakCfm28 } = now.sheet.header
  const [lowest] = now.run.points
  if (leakCfm28 === null || !lowest) return { notAssessed: 'The sheet has no row with the valve shut.' }
  const check = leakCheck(leakCfm28, lowest.cfm28)
  return {
    values: [value({ value: leakCfm28, unit: 'cfm', trace: [{ what: 'flow with the valve shut, at 28 inH2O', sum: 'as read', gives: `${leakCfm28.toFixed(2)} cfm, ${check.shareOfLowestPercent.toFixed(0)} % of the lowest lift` }] })],
    fill: () => ({ share: check.shareOfLowestPercent.toFixed(0) }),
  }
}

/** Bench against its plate, from the sheets of the stage: the one furthest off. */
export const plateDifference: Evaluator = (evidence) => {
  const sheets = evidence.sheets.filter(sheet => sheet.op === evidence.op && sheet.header.plateGiven)
  const [worst] = sheets.map(sheet => 100 * (sheet.header.plateRatio - 1)).sort((a, b) => Math.abs(b) - Math.abs(a))
  if (worst === undefined) return { notAssessed: 'No sheet of this stage gives the plate of its day beside the nominal.' }
  return { values: [value({ value: worst, unit: '%', trace: [{ what: 'plate today over its nominal, the sheet furthest off', sum: `100 x (${(1 + worst / 100).toFixed(5)} - 1), ${sheets.length} sheets`, gives: `${worst.toFixed(2)} %` }] })] }
}

/** The greatest coefficient on the smallest opening; the sentence of an accept quotes the curtain's at the lowest lift. */
export const dischargeCoefficient: Evaluator = (evidence, _criterion, unit) => {
  const now = runOf(evidence, evidence.op, unit)
  if (!now) return noSheet(unit)
  const side = unit.side ?? 'intake'
  const seat = valveOnSeat(evidence, now.sheet.header, side)
  const all = now.run.points.map(point => ({ liftMm: point.liftMm, coefficient: smallestOpeningCoefficient(point.cfm28, seat, point.liftMm) }))
  const [greatest] = [...all].sort((a, b) => b.coefficient - a.coefficient)
  const [lowest] = now.run.points
  if (!greatest || !lowest) return noSheet(unit)
  const curtain = curtainCoefficient(lowest.cfm28, valveHeadMm(evidence, now.sheet.header, side), lowest.liftMm)
  return {
    values: [value({ value: greatest.coefficient, unit: '-', liftMm: greatest.liftMm, trace: [
      ...all.map(one => ({ what: `on the smallest opening at ${liftInWords(one.liftMm)}`, sum: 'effective area over least geometric area', gives: one.coefficient.toFixed(3) })),
      { what: `on the curtain at ${liftInWords(lowest.liftMm)}`, sum: 'effective area over pi x valve x lift', gives: curtain.toFixed(3) },
    ] })],
    fill: ({ state }): Record<string, string> => state === 'accept' ? { value: curtain.toFixed(2) } : { lifts: liftInWords(greatest.liftMm) },
  }
}

/** The inner point furthest from the curve through the others. */
export const curveResidual: Evaluator = (evidence, _criterion, unit) => {
  const now = runOf(evidence, evidence.op, unit)
  if (!now) return noSheet(unit)
  const residuals = curveResiduals(now.run)
  const [worst] = [...residuals].sort((a, b) => Math.abs(b.percent) - Math.abs(a.percent))
  if (!worst) return { notAssessed: 'Fewer than five lifts have no curve to lie off.' }
  const exchanged = worst.offCurve ? digitExchange(worst.cfm28.toFixed(1), worst.expectedCfm28, now.run.points.find(point => point.liftMm === worst.liftMm)?.expandedUncertainty ?? 0) : null
  return {
    values: [value({ value: Math.abs(worst.percent), unit: '%', liftMm: worst.liftMm, at: liftInWords(worst.liftMm), trace: residuals.map(one => ({
      what: `off the curve at ${liftInWords(one.liftMm)}`, sum: `${one.cfm28.toFixed(2)} - ${one.expectedCfm28.toFixed(2)} cfm`, gives: `${one.percent.toFixed(1)} %`,
    })) })],
    ...(exchanged === null ? {} : { finding: 'Digits' }),
  }
}

/** Drift of the test pressure over the run, and whether the pressure written is the pressure used. */
export const testPressureDrift: Evaluator = (evidence, _criterion, unit) => {
  const now = runOf(evidence, evidence.op, unit)
  if (!now) return noSheet(unit)
  const side = unit.side ?? 'intake'
  const saidPa = now.sheet.header.pressurePa ?? now.run.points[0]?.pressurePa ?? null
  const usual = evidence.casting.usual_flow
  const compared = saidPa === null ? null : ratioToUsual(now.run, { liftMm: usual.lift_mm, cfm28: usual[side][usualStage(evidence.op)] }, saidPa)
  const steady = pressureSteadiness(now.run)
  if (compared?.pressure && saidPa !== null) {
    const { pressure, mean } = compared
    const drift = steady?.driftPercent ?? 0
    return {
      values: [value({ value: drift, unit: '%', trace: [{ what: 'ratio to the usual curve of this casting and stage, every lift', sum: `mean of ${compared.perLift.length} lifts, spread ${compared.spreadPercent.toFixed(1)} %`, gives: `${mean.toFixed(3)}; sqrt(${pressure.usedInH2O} / ${(saidPa / inchOfWater).toFixed(1)}) is ${pressure.ratioExpected.toFixed(3)}` }] })],
      verdict: 'reject',
      finding: 'Ratio',
      fill: () => ({ ratio: mean.toFixed(2), p_used: `${pressure.usedInH2O} inH2O`, p_said: `${(saidPa / inchOfWater).toFixed(1)} inH2O` }),
    }
  }
  if (!steady) return { notAssessed: 'The sheet has no pressure for each lift, so nobody can tell whether it held.' }
  const least = now.run.points.find(point => point.pressurePa === steady.leastPa)
  const lifts = steady.saggedLiftsMm.length > 0 ? steady.saggedLiftsMm : least ? [least.liftMm] : []
  return {
    values: [value({ value: steady.driftPercent, unit: '%', trace: [{ what: 'greatest less least pressure, over the greatest', sum: `100 x (${steady.greatestPa.toFixed(0)} - ${steady.leastPa.toFixed(0)}) / ${steady.greatestPa.toFixed(0)}`, gives: `${steady.driftPercent.toFixed(1)} %` }] })],
    ...(steady.onlyTop ? { finding: 'Top' } : {}),
    fill: () => ({ lifts: listInWords(lifts.map(liftInWords)) }),
  }
}

const inchOfWater = referenceBasis.pressurePa / 28

/** Exhaust flow as a percentage of intake flow, weighted by the card's lift curve, one cylinder. */
export const exhaustIntakeRatio: Evaluator = (evidence, _criterion, unit) => {
  const [exhaust, intake] = (['exhaust', 'intake'] as const).map(side => runOf(evidence, evidence.op, { cylinder: unit.cylinder, side }))
  if (!exhaust || !intake) return { notAssessed: `It takes a sheet of this stage for both sides of ${unit.cylinder === null ? 'one cylinder' : `cylinder ${unit.cylinder}`}.` }
  if (exhaust.run.points.length < 3 || intake.run.points.length < 3) return { notAssessed: 'A weighted ratio needs at least three lifts on both sheets.' }
  const ratio = ratioOfRuns(exhaust.run, intake.run, evidence.casting.lift_curve.max_lift)
  if (!ratio.weighted) return { notAssessed: `A sheet stops short of the card's greatest lift, ${liftInWords(evidence.casting.lift_curve.max_lift)}.` }
  return {
    values: [value({ value: ratio.weighted.percent, unit: '%', u: ratio.weighted.expandedUncertainty / 2, trace: [
      ...ratio.perLift.map(one => ({ what: `exhaust over intake at ${liftInWords(one.liftMm)}`, sum: 'at the same lift', gives: `${one.percent.toFixed(1)} %` })),
      { what: 'weighted by the lift curve', sum: 'mean flow over the open angle, exhaust over intake', gives: `${ratio.weighted.percent.toFixed(1)} %` },
    ] })],
  }
}

/** How much of the bench's range the run used. */
export const benchRangeUsed: Evaluator = (evidence, _criterion, unit) => {
  const now = runOf(evidence, evidence.op, unit)
  if (!now) return noSheet(unit)
  const read = now.run.points.flatMap(point => point.rangeShare === undefined || point.rangeShare === null ? [] : [{ liftMm: point.liftMm, share: point.rangeShare }])
  const [most] = [...read].sort((a, b) => b.share - a.share)
  if (most) return { values: [value({ value: 100 * most.share, unit: '%', liftMm: most.liftMm, trace: [{ what: 'greatest share of a range', sum: `at ${liftInWords(most.liftMm)}`, gives: `${(100 * most.share).toFixed(0)} %` }] })] }
  return { notAssessed: 'The sheet has no column that says how much of the range was used.' }
}

/** Spread between the cylinders of one side, above 0.12 of the valve diameter, where it is widest. */
export const spreadBetweenCylinders: Evaluator = (evidence, _criterion, unit) => {
  const side = unit.side ?? 'intake'
  const cylinders = Array.from({ length: evidence.casting.cylinders }, (_, index) => index + 1)
  const runs = cylinders.map(cylinder => runOf(evidence, evidence.op, { cylinder, side }))
  const there = runs.filter((one): one is SheetRun => one !== null && one.run.cylinder !== null)
  if (there.length < cylinders.length) return { notAssessed: `A spread needs every cylinder; still to run: ${listInWords(cylinders.filter(cylinder => !there.some(one => one.run.cylinder === cylinder)).map(String))}.` }
  const first = there[0] as SheetRun
  const spread = cylinderSpread(there.map(one => one.run), valveHeadMm(evidence, first.sheet.header, side))
  const { worst } = spread
  if (!worst) return { notAssessed: 'The sheets have no common lift above 0.12 of the valve diameter.' }
  const flows = there.map(one => ({ cylinder: one.run.cylinder as number, cfm28: flowAtLift(one.run, worst.liftMm)?.cfm28 ?? 0 }))
  const middle = median(flows.map(one => one.cfm28))
  const [furthest] = [...flows].sort((a, b) => a.cfm28 - b.cfm28)
  return {
    values: [value({ value: worst.percent, unit: '%', liftMm: worst.liftMm, trace: [
      ...spread.perLift.map(one => ({ what: `greatest less least over the mean at ${liftInWords(one.liftMm)}`, sum: 'all cylinders', gives: `${one.percent.toFixed(1)} %` })),
      { what: 'widest above 0.12 of the valve diameter', sum: flows.map(one => `cylinder ${one.cylinder} ${one.cfm28.toFixed(1)}`).join(', '), gives: `${worst.percent.toFixed(1)} % at ${liftInWords(worst.liftMm)}` },
    ] })],
    fill: ({ state }): Record<string, string> => furthest === undefined
      ? {}
      : { where: String(furthest.cylinder), ...(state === 'borderline' ? { value: (100 * (1 - furthest.cfm28 / middle)).toFixed(1) } : {}) },
  }
}
