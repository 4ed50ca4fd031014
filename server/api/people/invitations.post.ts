import { invitePerson } from '#server/services/people/invite-person'
import { defineRoute } from '#server/utils/define-route'
import { invitationInput } from '#shared/contract/inputs'

export default defineRoute({
  access: ['admin'],
  summary: 'Makes an account and sends its person a link to choose a password.',
  body: invitationInput,
  status: 201,
  keeps: true,
}, async ({ em, app, actor, body }) => invitePerson(em, app, actor, body))
