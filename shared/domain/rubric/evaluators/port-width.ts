import type { Evaluator } from '../evidence'
import { readingsOf } from '../readings-of'
import { readingValue } from '../reading-value'
import { whenNow } from '../spot-values'
import { difference } from './difference-of-readings'
import { pair, bothWanted } from './before-and-after'

/** Guide station or apex: the width itself; where the criterion is of the widening, after less before. */
export const portWidth: Evaluator = (evidence, criterion, unit) => {
  const spot = criterion.wants.find(want => want.quantity === criterion.quantity)?.places?.[0] ?? null
  if (criterion.unit === 'mm total') {
    const { before, after } = pair(evidence, criterion, unit, spot)
    return before && after ? { values: [difference('after less before', after, before, 'mm', spot)] } : bothWanted
  }
  const [reading] = readingsOf(evidence, { quantity: criterion.quantity, unit, ...whenNow(evidence), ...(spot === null ? {} : { spot }) })
  if (!reading) return { notAssessed: `Nobody has read the width at the ${spot ?? 'port'} yet.` }
  const value = readingValue(reading, 'mm')
  return { values: [value], fill: ({ limit }): Record<string, string> => limit === null ? {} : { todo: Math.max(0, limit - value.value).toFixed(2) } }
}
