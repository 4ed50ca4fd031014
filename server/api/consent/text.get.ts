import { viewConsentText } from '#server/services/safety/view-consent-text'
import { defineRoute } from '#server/utils/define-route'

export default defineRoute({
  access: ['safety', 'admin'],
  summary: 'The newest text of the safety form, as those who write it see it.',
}, async ({ em }) => viewConsentText(em))
