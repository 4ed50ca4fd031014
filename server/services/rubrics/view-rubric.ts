import type { EntityManager } from '@mikro-orm/postgresql'
import { RubricVersion } from '#server/db/entities/RubricVersion'
import { Refusal } from '#server/utils/refusal'
import type { RubricView } from '#shared/contract/views'

/**
 * One version of the rubric, whole.
 *
 * @throws {Refusal} rubric_not_found
 */
export async function viewRubric(em: EntityManager, version: number): Promise<RubricView> {
  const found = await em.findOne(RubricVersion, { version }, { populate: ['savedBy'] })
  if (!found) throw new Refusal('rubric_not_found')
  return { version, note: found.note, savedAt: found.savedAt.toISOString(), savedBy: found.savedBy?.$.name ?? null, rubric: found.rubric }
}
