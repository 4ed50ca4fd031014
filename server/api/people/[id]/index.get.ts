import { idParams } from '#shared/contract/inputs'
import { viewPerson } from '#server/services/people/view-person'
import { defineRoute } from '#server/utils/define-route'

export default defineRoute({
  access: ['admin'],
  summary: 'One account.',
  params: idParams,
}, async ({ em, app, params }) => viewPerson(em, app, params.id))
