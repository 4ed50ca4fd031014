import { saveConsentText } from '#server/services/safety/save-consent-text'
import { defineRoute } from '#server/utils/define-route'
import { consentTextInput } from '#shared/contract/safety'

export default defineRoute({
  access: ['safety'],
  summary: 'Saves the next version of the safety form; a changed safety clause asks everybody again.',
  body: consentTextInput,
  status: 201,
  keeps: true,
}, async ({ em, app, actor, body }) => saveConsentText(em, app, actor, body))
