import { Refusal } from '#server/utils/refusal'
import type { ReadingInput } from '#shared/contract/inputs'
import type { CastingCard } from '#shared/domain/geometry/casting'
import type { RubricStage, Want } from '#shared/domain/rubric/criterion'
import type { QuantityRead } from './quantity-read'

type Port = Pick<ReadingInput, 'cylinder' | 'side'>
type Reach = Pick<Want, 'per' | 'side'>

/**
 * Refuses a reading of a port the head has not, and one that does not say enough to count: where the stage wants a quantity of every
 * port, a reading that names none stands for none.
 *
 * @throws {Refusal} port_not_on_head; input_invalid with what is missing
 */
export function refuseWrongPort(casting: CastingCard, stage: RubricStage, { name, quantity }: QuantityRead, given: Port): void {
  if (given.cylinder !== null && given.cylinder > casting.cylinders) throw new Refusal('port_not_on_head', `This head has ${casting.cylinders} cylinders and no cylinder ${given.cylinder}.`)
  const reaches = reachesOf(stage, name)
  const lacks = (reaches.length > 0 ? reaches : [{ per: quantity.per }]).map(reach => missing(reach, given, quantity.title))
  const least = lacks.sort((a, b) => a.length - b.length)[0]
  if (least && least.length > 0) throw new Refusal('input_invalid', least[0]?.message, { issues: least })
}

/** What the stage wants the quantity of; for what it measures from a photo, what it wants the photo of. */
function reachesOf(stage: RubricStage, name: string): Reach[] {
  return stage.criteria.flatMap((criterion) => {
    const readings = criterion.wants.filter(want => want.kind === 'reading' && want.quantity === name)
    return readings.length === 0 && criterion.kind === 'photo-measured' && criterion.quantity === name ? criterion.wants : readings
  })
}

function missing(reach: Reach, given: Port, title: string): { path: string, code: string, message: string }[] {
  const issues = []
  if (reach.per !== 'head' && given.cylinder === null) issues.push({ path: 'cylinder', code: 'cylinder-needed', message: `Say which cylinder this ${title} is of.` })
  if ((reach.per === 'port' || reach.side !== undefined) && given.side === null) issues.push({ path: 'side', code: 'side-needed', message: `Say whether this ${title} is of the intake or the exhaust.` })
  else if (reach.side !== undefined && reach.side !== given.side) issues.push({ path: 'side', code: 'other-side', message: `Here the ${title} is wanted of the ${reach.side} side.` })
  return issues
}
