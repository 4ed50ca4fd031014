import { compressionRatio, discVolume } from '../../geometry/compression-ratio'
import type { Evaluated } from '../../uncertainty/evaluated'
import type { EvidenceSet, Evaluation, Evaluator } from '../evidence'
import { allReadingsOf } from '../readings-of'
import { readingValue } from '../reading-value'
import { notRead } from '../spot-values'

/** Fills that make a mean. Source: handbook 3.5. */
const fillsWanted = 3

interface Fills { cylinder: number, values: number[], standardUncertainty: number, instrument: string }

/**
 * Chamber volume, asked three ways by what the criterion says it is of: the mean of three fills, the range of the three, and the
 * largest mean less the smallest over the cylinders.
 *
 * Units: cc.
 * Source: handbook 3.5.
 */
export const chamberVolume: Evaluator = (evidence, criterion, unit) => {
  const where = criterion.where ?? ''
  if (where.includes('largest mean')) return spreadOfMeans(evidence)
  const fills = unit.cylinder === null ? null : fillsOf(evidence, unit.cylinder)
  if (fills === null) return notRead(criterion.quantity, unit)
  if (fills.values.length < fillsWanted) return { notAssessed: `${fills.values.length} of ${fillsWanted} fills of ${`cylinder ${fills.cylinder}`}; fill it again.` }
  return { values: [where.includes('mean') ? meanOf(fills) : rangeOf(fills)] }
}

/** The newest three fills: repeats of one reading, or readings one after the other. */
function fillsOf(evidence: EvidenceSet, cylinder: number): Fills | null {
  const readings = allReadingsOf(evidence, { quantity: 'chamber-volume', unit: { cylinder, side: null } })
  const [newest] = readings
  if (!newest) return null
  const single = readings.map(one => readingValue({ ...one, values: one.values.slice(0, 1) }, 'cc'))
  const values = newest.values.length >= fillsWanted
    ? newest.values.map(value => readingValue({ ...newest, values: [value] }, 'cc').value)
    : readings.flatMap(one => one.values.map(value => readingValue({ ...one, values: [value] }, 'cc').value)).slice(0, fillsWanted)
  return { cylinder, values, standardUncertainty: single[0]?.standardUncertainty ?? 0, instrument: newest.instrument }
}

function mean(values: readonly number[]): number {
  return values.reduce((sum, value) => sum + value, 0) / values.length
}

function meanOf(fills: Fills): Evaluated {
  const value = mean(fills.values)
  return {
    value, unit: 'cc', standardUncertainty: fills.standardUncertainty, degreesOfFreedom: null, at: null, liftMm: null,
    trace: [{ what: `mean of the fills, ${fills.instrument}`, sum: `(${fills.values.map(one => one.toFixed(2)).join(' + ')}) / ${fills.values.length}`, gives: `${value.toFixed(2)} cc` }],
  }
}

function rangeOf(fills: Fills): Evaluated {
  const value = Math.max(...fills.values) - Math.min(...fills.values)
  return {
    // The doubt of one fill is mostly the burette's, which all three share; the rubric's U stands for what is left.
    value, unit: 'cc', standardUncertainty: null, degreesOfFreedom: null, at: null, liftMm: null,
    trace: [{ what: 'largest fill less smallest', sum: `${Math.max(...fills.values).toFixed(2)} - ${Math.min(...fills.values).toFixed(2)}`, gives: `${value.toFixed(2)} cc` }],
  }
}

function spreadOfMeans(evidence: EvidenceSet): Evaluation {
  const cylinders = Array.from({ length: evidence.casting.cylinders }, (_, index) => index + 1)
  const all = cylinders.map(cylinder => fillsOf(evidence, cylinder))
  const complete = all.filter((fills): fills is Fills => fills !== null && fills.values.length >= fillsWanted)
  if (complete.length < cylinders.length) {
    const open = cylinders.filter(cylinder => !complete.some(fills => fills.cylinder === cylinder))
    return { notAssessed: `A spread needs every chamber; still to fill three times: cylinder ${open.join(', ')}.` }
  }
  const means = complete.map(fills => ({ cylinder: fills.cylinder, value: mean(fills.values), u: fills.standardUncertainty })).sort((a, b) => a.value - b.value)
  const [least, most] = [means[0], means[means.length - 1]]
  if (!least || !most) return { notAssessed: 'A spread needs every chamber.' }
  const value = most.value - least.value
  const ratios = [least, most].map(one => ratioOf(evidence, one.value))
  return {
    values: [{
      value, unit: 'cc', standardUncertainty: Math.hypot(least.u, most.u), degreesOfFreedom: null, at: `cylinder ${least.cylinder}`, liftMm: null,
      trace: [
        { what: 'means of three fills', sum: means.map(one => `cylinder ${one.cylinder} ${one.value.toFixed(2)}`).join(', '), gives: `${means.length} chambers` },
        { what: 'largest less smallest', sum: `${most.value.toFixed(2)} - ${least.value.toFixed(2)}`, gives: `${value.toFixed(2)} cc` },
      ],
    }],
    fill: () => ({ ratio: ((ratios[0] ?? 0) - (ratios[1] ?? 0)).toFixed(2) }),
  }
}

/** Compression ratio with this chamber, the rest from the casting card. */
function ratioOf(evidence: EvidenceSet, chamberCc: number): number {
  const card = evidence.casting
  return compressionRatio({
    sweptCc: card.swept_cc_each, chamberCc,
    gasketCc: discVolume(card.gasket_bore, card.gasket_thickness_crushed ?? 0),
    deckCc: discVolume(card.bore, card.deck_clearance ?? 0),
    dishCc: (card.piston_dish_cc ?? 0) - (card.piston_dome_cc ?? 0),
  })
}
