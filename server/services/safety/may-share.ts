import type { EntityManager } from '@mikro-orm/postgresql'
import { SharingChoice } from '#server/db/entities/Consent'

/**
 * Whether a person lets something of theirs be shared, as they last said; no until they say yes. Ask right before sharing and keep no
 * answer: taking it back takes effect at once.
 *
 * @param code `cohort-photos`, `later-teaching`, `sponsor-attendance`, `sponsor-result` or `improve-measuring`
 */
export async function mayShare(em: EntityManager, person: string, code: string): Promise<boolean> {
  const newest = await em.findOne(SharingChoice, { person, code }, { orderBy: { at: 'desc', id: 'desc' } })
  return newest?.allowed ?? false
}
