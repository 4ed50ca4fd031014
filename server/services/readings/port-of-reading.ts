import { Refusal } from '#server/utils/refusal'
import type { ReadingQuantity } from '#shared/contract/quantities'
import type { CastingCard } from '#shared/domain/geometry/casting'
import type { RubricStage, Want } from '#shared/domain/rubric/criterion'
import { sameSpot } from '#shared/domain/rubric/same-spot'
import type { Side } from '#shared/domain/units/port'

export interface PortOfReading { cylinder: number | null, side: Side | null }

/**
 * Refuses a reading that names a port the head does not have, or leaves out what its want is told apart by: a wall that names no
 * cylinder would be of none.
 *
 * @throws {Refusal} port_not_on_head
 */
export function checkPortOfReading(stage: RubricStage | undefined, card: CastingCard, quantity: { name: string, is: ReadingQuantity }, at: PortOfReading & { spot: string | null }): void {
  if (at.cylinder !== null && at.cylinder > card.cylinders) throw new Refusal('port_not_on_head', `This head has no cylinder ${at.cylinder}; it has ${card.cylinders}.`)
  const wants = wantsOf(stage, quantity.name, at.spot)
  const missing = [
    at.cylinder === null && needs(wants, quantity.is, want => want.per !== 'head') ? 'the cylinder' : null,
    at.side === null && needs(wants, quantity.is, want => want.per === 'port' || want.side !== undefined) ? 'the side' : null,
  ].filter(part => part !== null)
  if (missing.length > 0) throw new Refusal('port_not_on_head', `Say ${missing.join(' and ')} the ${quantity.is.title} was read at.`)
}

/** Wants of the stage for that quantity: those that name the spot, else those that name none, else all. */
function wantsOf(stage: RubricStage | undefined, quantity: string, spot: string | null): Want[] {
  const criteria = stage?.criteria ?? []
  const read = criteria.flatMap(criterion => criterion.wants).filter(want => want.kind === 'reading' && want.quantity === quantity)
  // What is measured from a photo one day is typed for what the photo is wanted of.
  const wants = read.length > 0 ? read : criteria.filter(criterion => criterion.quantity === quantity).flatMap(criterion => criterion.wants)
  const named = wants.filter(want => want.places?.some(place => sameSpot(place, spot)))
  return named.length > 0 ? named : wants
}

/** Where one want asks for less, less is enough. */
function needs(wants: readonly Want[], quantity: ReadingQuantity, test: (want: Pick<Want, 'per' | 'side'>) => boolean): boolean {
  return wants.length === 0 ? test({ per: quantity.per }) : wants.every(test)
}
