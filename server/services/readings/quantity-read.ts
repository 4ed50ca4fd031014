import { Refusal } from '#server/utils/refusal'
import { findReadingQuantity, type ReadingQuantity } from '#shared/contract/quantities'
import type { RubricStage } from '#shared/domain/rubric/criterion'

/** The quantity a reading is of, by its own name or by the criterion it is for. */
export interface QuantityRead { name: string, quantity: ReadingQuantity }

/**
 * Which quantity is meant. A criterion stands for the one quantity it is read by; one that is read by several has to be told which.
 *
 * @throws {Refusal} quantity_unknown
 */
export function quantityRead(stage: RubricStage, given: { quantity?: string | undefined, criterion?: string | undefined }): QuantityRead {
  const name = given.quantity ?? quantityOfCriterion(stage, given.criterion ?? '')
  const quantity = findReadingQuantity(name)
  if (!quantity) throw new Refusal('quantity_unknown', `"${name}" is no quantity a reading can be of.`)
  return { name, quantity }
}

function quantityOfCriterion(stage: RubricStage, id: string): string {
  const criterion = stage.criteria.find(one => one.id === id)
  if (!criterion) throw new Refusal('quantity_unknown', `Op ${stage.op} has no criterion ${id}.`)
  const wanted = [...new Set(criterion.wants.flatMap(want => want.kind === 'reading' && want.quantity ? [want.quantity] : []))]
  const [only] = wanted
  if (wanted.length === 1 && only !== undefined) return only
  if (findReadingQuantity(criterion.quantity) && (wanted.length === 0 || wanted.includes(criterion.quantity))) return criterion.quantity
  if (wanted.length > 1) throw new Refusal('quantity_unknown', `${id} is read by several quantities. Say which: ${wanted.join(', ')}.`)
  throw new Refusal('quantity_unknown', `${id} takes no reading.`)
}
