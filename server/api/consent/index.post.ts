import { signConsent } from '#server/services/safety/sign-consent'
import { defineRoute } from '#server/utils/define-route'
import { consentInput } from '#shared/contract/safety'

export default defineRoute({
  access: ['student', 'instructor', 'admin', 'safety'],
  summary: 'Signs the safety form: every clause ticked.',
  body: consentInput,
  status: 201,
  keeps: true,
}, async ({ em, app, actor, body }) => signConsent(em, app, actor, body))
