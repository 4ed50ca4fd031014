import { idParams } from '#shared/contract/inputs'
import { inviteAgain } from '#server/services/people/invite-again'
import { defineRoute } from '#server/utils/define-route'

export default defineRoute({
  access: ['admin'],
  summary: 'Sends somebody who never came a new link.',
  params: idParams,
  keeps: true,
}, async ({ em, app, actor, params }) => inviteAgain(em, app, actor, params.id))
