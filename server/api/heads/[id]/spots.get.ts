import { listSpots } from '#server/services/heads/list-spots'
import { defineRoute } from '#server/utils/define-route'
import { idParams } from '#shared/contract/inputs'

export default defineRoute({
  access: ['student', 'instructor', 'admin'],
  summary: 'Everything read at every spot of a head, newest first.',
  params: idParams,
}, ({ em, app, actor, params }) => listSpots(em, app, actor, params.id))
