import { curtainCoefficient } from '../../airflow/curtain-coefficient'
import { smallestOpeningCoefficient } from '../../airflow/smallest-opening-coefficient'
import type { Evaluator } from '../evidence'
import { runOf, valveHeadMm, valveOnSeat } from '../flow-evidence'
import { liftInWords } from '../words'
import { flowValue, noSheet } from './flow-value'

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
    values: [flowValue({ value: greatest.coefficient, unit: '-', liftMm: greatest.liftMm, trace: [
      ...all.map(one => ({ what: `on the smallest opening at ${liftInWords(one.liftMm)}`, sum: 'effective area over least geometric area', gives: one.coefficient.toFixed(3) })),
      { what: `on the curtain at ${liftInWords(lowest.liftMm)}`, sum: 'effective area over pi x valve x lift', gives: curtain.toFixed(3) },
    ] })],
    fill: ({ state }): Record<string, string> => state === 'accept' ? { value: curtain.toFixed(2) } : { lifts: liftInWords(greatest.liftMm) },
  }
}
