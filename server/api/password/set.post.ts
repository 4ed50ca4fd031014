import { setPassword } from '#server/services/people/set-password'
import { definePublicRoute } from '#server/utils/define-public-route'
import { setPasswordInput } from '#shared/contract/inputs'

export default definePublicRoute({
  why: 'Whoever holds an invitation or a reset link has no password yet.',
  summary: 'Sets a password by the link of an invitation or a reset, once; ends every sign-in of that person.',
  body: setPasswordInput,
}, async ({ em, body }) => {
  await setPassword(em, body.token, body.password)
  return { set: true }
})
