import type { Evaluated } from '../../uncertainty/evaluated'
import type { Evaluator } from '../evidence'
import { readingsOf } from '../readings-of'
import { readingValue } from '../reading-value'
import { sameSpot } from '../same-spot'
import { difference } from './difference-of-readings'

/** Drop of the rig over ten minutes, cold and, where it was done, warm; the worse of the two. */
export const pressureDrop: Evaluator = (evidence, _criterion, unit) => {
  const read = readingsOf(evidence, { quantity: 'rig-pressure', unit })
  const values = ['', 'cold ', 'warm '].flatMap((state): Evaluated[] => {
    const start = read.find(one => sameSpot(one.spot, `${state}0 min`))
    const end = read.find(one => sameSpot(one.spot, `${state}10 min`))
    return start && end ? [difference('drop in ten minutes', start, end, 'kPa', state === '' ? null : state.trim())] : []
  })
  const start = read.find(one => one.spot !== null && /(?:^| )0 min$/.test(one.spot))
  return values.length === 0 || !start
    ? { notAssessed: 'It takes the gauge at 0 and at 10 minutes.' }
    : { values, fill: () => ({ p: `${readingValue(start, 'kPa').value.toFixed(0)} kPa` }) }
}
