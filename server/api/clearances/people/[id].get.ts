import { viewPersonSafety } from '#server/services/safety/view-person-safety'
import { defineRoute } from '#server/utils/define-route'
import { idParams } from '#shared/contract/inputs'

export default defineRoute({
  access: ['safety', 'admin'],
  summary: 'One person\'s clearances, signatures and sharing; first-aid words for the safety officer only.',
  params: idParams,
}, async ({ em, app, actor, params }) => viewPersonSafety(em, app, actor, params.id))
