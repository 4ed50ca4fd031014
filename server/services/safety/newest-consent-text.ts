import type { EntityManager } from '@mikro-orm/postgresql'
import { ConsentText } from '#server/db/entities/Consent'
import { Refusal } from '#server/utils/refusal'

/** The safety form people are asked to sign now. @throws {Refusal} consent_text_missing */
export async function newestConsentText(em: EntityManager): Promise<ConsentText> {
  const [text] = await em.find(ConsentText, {}, { orderBy: { version: 'desc' }, limit: 1 })
  if (!text) throw new Refusal('consent_text_missing')
  return text
}
