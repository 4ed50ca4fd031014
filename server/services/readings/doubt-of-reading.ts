import { Refusal } from '#server/utils/refusal'
import { unitName } from '#shared/contract/typed-values'
import { convert } from '#shared/domain/units/convert'

/**
 * The instrument's own U (k = 2) for these readings, in their base unit; of a relative one, for their mean.
 *
 * @throws {Refusal} instrument_unfit when its doubt is in a unit that has nothing to do with the quantity
 */
export function doubtOfReading(instrument: { name: string, expandedU: number, relative: boolean, unit: string }, values: readonly number[], baseUnit: string): number {
  const { expandedU, relative } = instrument
  if (relative) return Math.abs(values.reduce((sum, value) => sum + value, 0) / values.length) * expandedU / 100
  const unit = unitName(instrument.unit)
  if (unit === baseUnit || expandedU === 0) return expandedU
  try {
    // A difference, so that what two scales are apart at nought falls out.
    return convert(expandedU, unit, baseUnit) - convert(0, unit, baseUnit)
  }
  catch {
    throw new Refusal('instrument_unfit', `The doubt of the ${instrument.name} is in ${instrument.unit}, and this is read in ${baseUnit}.`)
  }
}
