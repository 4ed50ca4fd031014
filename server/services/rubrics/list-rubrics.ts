import type { EntityManager } from '@mikro-orm/postgresql'
import { RubricVersion } from '#server/db/entities/RubricVersion'
import type { RubricSummary } from '#shared/contract/views'

/** Every version of the rubric, newest first. */
export async function listRubrics(em: EntityManager): Promise<RubricSummary[]> {
  const versions = await em.find(RubricVersion, {}, { fields: ['version', 'note', 'savedAt', 'savedBy.name'], orderBy: { version: 'desc' } })
  return versions.map(one => ({ version: one.version, note: one.note, savedAt: one.savedAt.toISOString(), savedBy: one.savedBy?.$.name ?? null }))
}
