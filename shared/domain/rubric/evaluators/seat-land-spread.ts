import type { Evaluator } from '../evidence'
import { extreme, notRead, spotValues } from '../spot-values'

/** Most land less least land round the ring; `at` is where it is fat, because that is where it is blended. */
export const seatLandSpread: Evaluator = (evidence, criterion, unit) => {
  const values = spotValues(evidence, criterion, unit, 'seat-land')
  const least = extreme(values, 'least')
  const most = extreme(values, 'greatest')
  if (!least || !most || values.length < 2) return notRead('seat-land', unit)
  const value = most.value - least.value
  return {
    values: [{
      value,
      unit: 'mm',
      standardUncertainty: Math.hypot(most.standardUncertainty ?? 0, least.standardUncertainty ?? 0),
      degreesOfFreedom: null,
      at: most.at,
      liftMm: null,
      trace: [{ what: 'most less least', sum: `${most.value.toFixed(2)} (${most.at}) - ${least.value.toFixed(2)} (${least.at})`, gives: `${value.toFixed(2)} mm` }],
    }],
  }
}
