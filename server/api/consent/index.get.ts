import { viewConsent } from '#server/services/safety/view-consent'
import { defineRoute } from '#server/utils/define-route'

export default defineRoute({
  access: ['student', 'instructor', 'admin', 'safety'],
  summary: 'The safety form with what one signed, one\'s sharing choices, first-aid words and clearances.',
}, async ({ em, app, actor }) => viewConsent(em, app, actor))
