import { viewHead } from '#server/services/heads/view-head'
import { defineRoute } from '#server/utils/define-route'
import { idParams } from '#shared/contract/inputs'

export default defineRoute({
  access: ['student', 'instructor', 'admin', 'safety'],
  summary: 'A head with its route: every stage and point, how it stands and why.',
  params: idParams,
}, ({ em, app, actor, params }) => viewHead(em, app, actor, params.id))
