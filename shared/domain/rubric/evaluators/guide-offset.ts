import type { Evaluator } from '../evidence'
import { readingsOf } from '../readings-of'
import { readingValue } from '../reading-value'

/** Share of the width that lies on the cylinder-wall side of the guide centre, after the cut. */
export const guideOffset: Evaluator = (evidence, criterion, unit) => {
  const side = (spot: string) => readingsOf(evidence, { quantity: criterion.quantity, unit, spot, when: 'after' })[0]
  const [wall, other] = [side('cylinder-wall side'), side('other side')]
  if (!wall || !other) return { notAssessed: 'It takes both offsets from the guide centre, after the cut.' }
  const [a, b] = [readingValue(wall, 'mm'), readingValue(other, 'mm')]
  const whole = a.value + b.value
  if (!(whole > 0)) return { notAssessed: 'Two offsets that add up to nothing are not a width; read them again.' }
  const value = 100 * a.value / whole
  return {
    values: [{
      value, unit: '%', degreesOfFreedom: null, at: 'cylinder-wall side', liftMm: null,
      standardUncertainty: 100 * Math.hypot(b.value * (a.standardUncertainty ?? 0), a.value * (b.standardUncertainty ?? 0)) / whole ** 2,
      trace: [{ what: 'share on the cylinder-wall side', sum: `100 x ${a.value.toFixed(2)} / (${a.value.toFixed(2)} + ${b.value.toFixed(2)})`, gives: `${value.toFixed(1)} %` }],
    }],
  }
}
