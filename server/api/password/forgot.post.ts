import { getRequestIP } from 'h3'
import { askForReset } from '#server/services/people/ask-for-reset'
import { definePublicRoute } from '#server/utils/define-public-route'
import { forgotInput } from '#shared/contract/inputs'

export default definePublicRoute({
  why: 'Somebody who forgot the password cannot sign in.',
  summary: 'Sends a link to set a new password to that e-mail, if the school has it; the answer never tells.',
  body: forgotInput,
  status: 202,
}, async ({ event, app, em, body }) => {
  await askForReset(em, app, body.email, getRequestIP(event) ?? 'unknown')
  return { sent: true }
})
