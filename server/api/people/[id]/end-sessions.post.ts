import { idParams } from '#shared/contract/inputs'
import { endPersonsSessions } from '#server/services/people/end-persons-sessions'
import { defineRoute } from '#server/utils/define-route'

export default defineRoute({
  access: ['admin'],
  summary: 'Ends every sign-in of a person.',
  params: idParams,
}, async ({ em, actor, params }) => endPersonsSessions(em, actor, params.id))
