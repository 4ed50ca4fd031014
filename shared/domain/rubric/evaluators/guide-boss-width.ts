import type { Evaluator } from '../evidence'
import { readingsOf } from '../readings-of'
import { readingValue } from '../reading-value'

/** Wall round the stem: (boss - stem) / 2 in both directions. */
export const guideBossWidth: Evaluator = (evidence, criterion, unit) => {
  const read = readingsOf(evidence, { quantity: criterion.quantity, unit })
  if (read.length === 0) return { notAssessed: 'Nobody has read the guide boss yet.' }
  const stems = readingsOf(evidence, { quantity: 'valve-stem-diameter', op: 10, unit }).map(one => readingValue(one, 'mm'))
  const thickest = [...stems].sort((a, b) => b.value - a.value)[0]
  const stemMm = thickest?.value ?? evidence.casting.valves[unit.side ?? 'intake'].stem
  return {
    values: read.map((one) => {
      const boss = readingValue(one, 'mm')
      const value = (boss.value - stemMm) / 2
      return {
        ...boss, value, standardUncertainty: Math.hypot(boss.standardUncertainty ?? 0, thickest?.standardUncertainty ?? 0.005) / 2,
        trace: [...boss.trace, { what: thickest ? 'boss less the stem as measured, halved' : 'boss less the stem of the card, halved', sum: `(${boss.value.toFixed(2)} - ${stemMm.toFixed(2)}) / 2`, gives: `${value.toFixed(2)} mm` }],
      }
    }),
  }
}
