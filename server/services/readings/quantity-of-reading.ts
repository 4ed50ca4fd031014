import { Refusal } from '#server/utils/refusal'
import type { ReadingInput } from '#shared/contract/inputs'
import { findReadingQuantity, type ReadingQuantity } from '#shared/contract/quantities'
import type { RubricStage } from '#shared/domain/rubric/criterion'

/**
 * What a reading is of: the quantity it names, or the one its criterion wants read.
 *
 * @throws {Refusal} quantity_unknown, which names the choices where a criterion wants several
 */
export function quantityOfReading(stage: RubricStage | undefined, input: Pick<ReadingInput, 'quantity' | 'criterion'>): { name: string, is: ReadingQuantity } {
  const name = input.quantity ?? ofCriterion(stage, input.criterion ?? '')
  const is = findReadingQuantity(name)
  if (!is) throw new Refusal('quantity_unknown', `A reading cannot be of "${name}".`)
  return { name, is }
}

function ofCriterion(stage: RubricStage | undefined, id: string): string {
  const criterion = stage?.criteria.find(one => one.id === id)
  if (!criterion) throw new Refusal('quantity_unknown', `This stage has no criterion ${id}.`)
  const wanted = [...new Set(criterion.wants.flatMap(want => (want.kind === 'reading' && want.quantity ? [want.quantity] : [])))]
  if (wanted.includes(criterion.quantity) || wanted.length === 0) return criterion.quantity
  const [only] = wanted
  if (only !== undefined && wanted.length === 1) return only
  throw new Refusal('quantity_unknown', `${id} rests on several quantities; name one: ${wanted.join(', ')}.`)
}
