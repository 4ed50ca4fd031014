import type { EntityManager } from '@mikro-orm/postgresql'
import type { ConsentTextView } from '#shared/contract/safety'
import { newestConsentText } from './newest-consent-text'
import { toConsentTextView } from './save-consent-text'

/** The newest safety form as those who write it see it. @throws {Refusal} consent_text_missing */
export async function viewConsentText(em: EntityManager): Promise<ConsentTextView> {
  const text = await newestConsentText(em)
  const savedBy = await text.savedBy?.loadOrFail()
  return toConsentTextView(text, savedBy?.name ?? null)
}
