import { convert } from '../units/convert'
import type { Evaluated } from '../uncertainty/evaluated'
import { effectiveDegreesOfFreedom } from '../uncertainty/effective-degrees-of-freedom'
import type { ReadingEvidence } from './evidence'
import { quantityInWords } from './words'

/** Units nothing is converted to or from. */
const asTheyAre = new Set(['count', 'yes/no', 'pH', '%', 'ratio', '1', '-', 'points', 'stations'])

/**
 * A reading as a value with its doubt: the mean of its repeats, the instrument's U halved, and the scatter of the repeats, s / √n.
 *
 * Student's t (through the degrees of freedom) is for repeats at one spot only; one reading has the instrument's doubt alone.
 * A count or yes/no has none.
 *
 * Units: `unit`, converted from the reading's own.
 * Source: handbook 3.1; JCGM 100:2008, 4.2 and G.4 (from memory).
 *
 * @throws {RangeError} when the reading has no values, one is not finite, or its unit cannot be converted
 */
export function readingValue(reading: ReadingEvidence, unit: string): Evaluated {
  const { values } = reading
  if (values.length === 0) throw new RangeError('a reading has at least one value')
  const factor = reading.unit === unit || asTheyAre.has(unit) || asTheyAre.has(reading.unit) ? 1 : convert(1, reading.unit, unit)
  const inUnit = values.map(value => value * factor)
  if (!inUnit.every(Number.isFinite)) throw new RangeError('a reading is finite')
  const n = inUnit.length
  const value = inUnit.reduce((sum, one) => sum + one, 0) / n
  const ofInstrument = reading.expandedU * factor / 2
  const scatter = n < 2 ? 0 : Math.sqrt(inUnit.reduce((sum, one) => sum + (one - value) ** 2, 0) / (n - 1) / n)
  const counted = unit === 'count' || unit === 'yes/no'
  const standardUncertainty = counted ? null : Math.hypot(ofInstrument, scatter)
  const degreesOfFreedom = counted || scatter === 0 || standardUncertainty === 0
    ? null
    : effectiveDegreesOfFreedom([{ standardUncertainty: ofInstrument, degreesOfFreedom: null }, { standardUncertainty: scatter, degreesOfFreedom: n - 1 }])
  const shown = inUnit.map(one => trimmed(one)).join(' + ')
  return {
    value,
    unit,
    standardUncertainty,
    degreesOfFreedom,
    at: reading.spot,
    liftMm: null,
    trace: [{
      what: `${quantityInWords(reading.quantity)}${reading.spot === null ? '' : ` at ${reading.spot}`}, ${reading.instrument}`,
      sum: n === 1 ? 'as read' : `(${shown}) / ${n}`,
      gives: `${trimmed(value)} ${unit === '1' || unit === '-' ? '' : unit}${standardUncertainty === null || standardUncertainty === 0 ? '' : ` ± ${trimmed(2 * standardUncertainty)}`}`.replace('  ', ' ').trim(),
    }],
  }
}

/** A figure without the digits conversion leaves behind. */
function trimmed(value: number): string {
  return String(Number(value.toFixed(4)))
}
