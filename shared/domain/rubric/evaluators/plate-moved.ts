import type { Evaluator } from '../evidence'
import { readingsOf } from '../readings-of'
import { readingValue } from '../reading-value'

/** Bench plate after against before: how far it moved, either way. */
export const plateMoved: Evaluator = (evidence) => {
  const [before, after] = ['before', 'after'].map(spot => readingsOf(evidence, { quantity: 'plate-flow', spot })[0])
  if (!before || !after) return { notAssessed: 'It takes the plate before and after the session.' }
  const [a, b] = [readingValue(before, 'cfm'), readingValue(after, 'cfm')]
  if (!(a.value > 0)) return { notAssessed: 'The plate reads nothing; read it again.' }
  const value = Math.abs(100 * (b.value / a.value - 1))
  return {
    values: [{
      // The bench's absolute error is in both readings and falls out; the rubric's U is for what is left.
      value, unit: '%', standardUncertainty: null, degreesOfFreedom: null, at: null, liftMm: null,
      trace: [{ what: 'plate after over before', sum: `100 x (${b.value.toFixed(2)} / ${a.value.toFixed(2)} - 1)`, gives: `${value.toFixed(2)} %, either way` }],
    }],
  }
}
