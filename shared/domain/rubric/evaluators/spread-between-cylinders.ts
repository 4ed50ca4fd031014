import { cylinderSpread } from '../../airflow/cylinder-spread'
import { flowAtLift } from '../../airflow/flow-at-lift'
import { median } from '../../uncertainty/median'
import type { Evaluator } from '../evidence'
import { runOf, type SheetRun, valveHeadMm } from '../flow-evidence'
import { liftInWords, listInWords } from '../words'
import { flowValue } from './flow-value'

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
    values: [flowValue({ value: worst.percent, unit: '%', liftMm: worst.liftMm, trace: [
      ...spread.perLift.map(one => ({ what: `greatest less least over the mean at ${liftInWords(one.liftMm)}`, sum: 'all cylinders', gives: `${one.percent.toFixed(1)} %` })),
      { what: 'widest above 0.12 of the valve diameter', sum: flows.map(one => `cylinder ${one.cylinder} ${one.cfm28.toFixed(1)}`).join(', '), gives: `${worst.percent.toFixed(1)} % at ${liftInWords(worst.liftMm)}` },
    ] })],
    fill: ({ state }): Record<string, string> => furthest === undefined
      ? {}
      : { where: String(furthest.cylinder), ...(state === 'borderline' ? { value: (100 * (1 - furthest.cfm28 / middle)).toFixed(1) } : {}) },
  }
}
