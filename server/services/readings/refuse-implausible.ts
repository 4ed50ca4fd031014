import { Refusal } from '#server/utils/refusal'
import type { ReadingQuantity } from '#shared/contract/quantities'
import type { CastingCard } from '#shared/domain/geometry/casting'
import { nominalLength } from '#shared/domain/geometry/nominal-length'
import { plausibleLength } from '#shared/domain/units/plausible-length'
import type { Side } from '#shared/domain/units/port'

/**
 * Refuses what no iron can be: nearly always another unit than was meant. Never a judgement of the work.
 *
 * @param values in the base unit, one for each of `typed`
 * @throws {Refusal} reading_not_plausible, with `issues` that name each figure
 */
export function refuseImplausible(quantity: { name: string, is: ReadingQuantity }, values: readonly number[], typed: readonly string[], unit: string, of: { card: CastingCard, side: Side | null }): void {
  const { is, name } = quantity
  const nominal = nominalLength(of.card, name, of.side)
  const issues = values.flatMap((value, index) => {
    const given = `${typed[index]?.trim() ?? ''} ${unit}`
    if (value < is.least || value > is.most) return [{ path: `values.${index}`, code: 'not-plausible', message: `${given} cannot be the ${is.title}: it lies between ${is.least} and ${is.most} ${is.baseUnit}. Check the unit.` }]
    if (nominal === null) return []
    const found = plausibleLength(is.title, value, nominal)
    return found.plausible ? [] : [{ path: `values.${index}`, code: 'not-plausible', message: found.message }]
  })
  const [first] = issues
  if (first) throw new Refusal('reading_not_plausible', first.message, { issues })
}
