import type { Evaluated } from '../../uncertainty/evaluated'
import { baseUnit } from '../base-unit'
import type { Criterion } from '../criterion'
import type { EvidenceSet, Evaluator, JudgedUnit, ReadingEvidence } from '../evidence'
import { readingsOf } from '../readings-of'
import { readingValue } from '../reading-value'
import { sameSpot } from '../same-spot'

/**
 * One reading less another, each with its own doubt.
 *
 * @throws {RangeError} as `readingValue`
 */
function difference(what: string, one: ReadingEvidence, other: ReadingEvidence, unit: string, at: string | null): Evaluated {
  const [a, b] = [readingValue(one, unit), readingValue(other, unit)]
  const value = a.value - b.value
  return {
    value, unit, standardUncertainty: Math.hypot(a.standardUncertainty ?? 0, b.standardUncertainty ?? 0), degreesOfFreedom: null, at, liftMm: null,
    trace: [...a.trace, ...b.trace, { what, sum: `${a.value.toFixed(2)} - ${b.value.toFixed(2)}`, gives: `${value.toFixed(2)} ${unit}` }],
  }
}

function pair(evidence: EvidenceSet, criterion: Criterion, unit: JudgedUnit, spot: string | null): { before: ReadingEvidence | undefined, after: ReadingEvidence | undefined } {
  const asked = { quantity: criterion.quantity, unit, ...(spot === null ? {} : { spot }) }
  return { before: readingsOf(evidence, { ...asked, when: 'before' })[0], after: readingsOf(evidence, { ...asked, when: 'after' })[0] }
}

const bothWanted = { notAssessed: 'It takes a reading before the cut and one after it.' }

/** Shortened, lowered: before less after. */
export const beforeLessAfter: Evaluator = (evidence, criterion, unit) => {
  const { before, after } = pair(evidence, criterion, unit, null)
  return before && after ? { values: [difference('before less after', before, after, baseUnit(criterion.unit), null)] } : bothWanted
}

/** Guide station or apex: the width itself; where the criterion is of the widening, after less before. */
export const portWidth: Evaluator = (evidence, criterion, unit) => {
  const spot = criterion.wants.find(want => want.quantity === criterion.quantity)?.places?.[0] ?? null
  if (criterion.unit === 'mm total') {
    const { before, after } = pair(evidence, criterion, unit, spot)
    return before && after ? { values: [difference('after less before', after, before, 'mm', spot)] } : bothWanted
  }
  const [reading] = readingsOf(evidence, { quantity: criterion.quantity, unit, ...(spot === null ? {} : { spot }) })
  if (!reading) return { notAssessed: `Nobody has read the width at the ${spot ?? 'port'} yet.` }
  const value = readingValue(reading, 'mm')
  return { values: [value], fill: ({ limit }): Record<string, string> => limit === null ? {} : { todo: Math.max(0, limit - value.value).toFixed(2) } }
}

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
