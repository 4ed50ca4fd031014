import type { Evaluated } from '../../uncertainty/evaluated'
import type { Evaluator, ReadingEvidence } from '../evidence'
import { readingsOf } from '../readings-of'
import { sameSpot } from '../same-spot'
import { difference } from './difference-of-readings'

/** Throat and land after finishing against before: metal taken is positive in both. */
export const shapeChange: Evaluator = (evidence, _criterion, unit) => {
  const earlier = (quantity: string, spot: string | null): ReadingEvidence | undefined => evidence.readings
    .filter(one => one.quantity === quantity && one.op < evidence.op && one.cylinder === unit.cylinder && one.side === unit.side && sameSpot(one.spot, spot))
    .sort((a, b) => b.op - a.op || b.takenAt - a.takenAt)[0]
  const values = ['throat-diameter', 'seat-land'].flatMap(quantity => readingsOf(evidence, { quantity, unit }).flatMap((now): Evaluated[] => {
    const before = earlier(quantity, now.spot)
    if (!before) return []
    // A throat grows when metal goes, a land shrinks.
    return quantity === 'seat-land'
      ? [difference('land before finishing less after', before, now, 'mm', `land, ${now.spot}`)]
      : [difference('throat after finishing less before', now, before, 'mm', `throat, ${now.spot}`)]
  }))
  if (values.length === 0) return { notAssessed: 'There is no throat or land from before finishing, at the same spots, to hold the new readings against.' }
  // The library's sentences of one side speak of the throat.
  return { values, plainAt: values.map(one => one.at).filter((at): at is string => at?.startsWith('land') ?? false) }
}
