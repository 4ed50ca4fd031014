import { Refusal } from '#server/utils/refusal'
import type { CastingCard } from '#shared/domain/geometry/casting'
import { nominalLength } from '#shared/domain/geometry/nominal-length'
import type { Side } from '#shared/domain/units/port'
import { plausibleLength } from '#shared/domain/units/plausible-length'
import type { QuantityRead } from './quantity-read'

/**
 * Refuses figures that cannot be what they are said to be, which is how a slip of unit shows; a bad cut is never refused.
 *
 * @param values base unit, in the order typed
 * @throws {Refusal} reading_not_plausible
 */
export function refuseImplausible(card: CastingCard, { name, quantity }: QuantityRead, side: Side | null, values: readonly number[]): void {
  const nominal = nominalLength(card, name, side)
  const issues = values.flatMap((value, index) => {
    const against = nominal === null ? null : plausibleLength(quantity.title, value, nominal)
    const message = against?.plausible === false ? against.message : value < quantity.least || value > quantity.most ? outside(quantity, value) : null
    return message === null ? [] : [{ path: `values.${index}`, code: 'not-plausible', message }]
  })
  if (issues.length > 0) throw new Refusal('reading_not_plausible', issues[0]?.message, { issues })
}

function outside({ title, baseUnit, least, most }: QuantityRead['quantity'], value: number): string {
  const unit = baseUnit === 'count' || baseUnit === 'yes/no' || baseUnit === 'pH' ? '' : ` ${baseUnit}`
  return `${Number(value.toPrecision(4))}${unit} cannot be the ${title}: it lies between ${least} and ${most}${unit} on any head. Check the figure and its unit.`
}
