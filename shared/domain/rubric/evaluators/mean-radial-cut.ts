import type { Evaluator } from '../evidence'
import { readingsOf } from '../readings-of'
import { readingValue } from '../reading-value'

/** Exhaust cut over intake cut, one cylinder. */
export const meanRadialCut: Evaluator = (evidence, criterion, unit) => {
  const of = (side: 'intake' | 'exhaust') => readingsOf(evidence, { quantity: criterion.quantity, unit: { cylinder: unit.cylinder, side } }).find(one => one.side === side)
  const [exhaust, intake] = [of('exhaust'), of('intake')]
  if (!exhaust || !intake) return { notAssessed: 'It takes the mean radial cut of both ports of the cylinder.' }
  const [a, b] = [readingValue(exhaust, 'mm'), readingValue(intake, 'mm')]
  if (!(b.value > 0)) return { notAssessed: 'The intake cut reads as nothing; there is nothing to divide by.' }
  const value = a.value / b.value
  return {
    values: [{
      value, unit: '1', degreesOfFreedom: null, at: null, liftMm: null,
      standardUncertainty: Math.hypot(a.standardUncertainty ?? 0, value * (b.standardUncertainty ?? 0)) / b.value,
      trace: [{ what: 'exhaust cut over intake cut', sum: `${a.value.toFixed(2)} / ${b.value.toFixed(2)}`, gives: value.toFixed(2) }],
    }],
  }
}
