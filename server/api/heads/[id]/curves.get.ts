import { listCurves } from '#server/services/heads/curve-sets'
import { defineRoute } from '#server/utils/define-route'
import { idParams } from '#shared/contract/inputs'

export default defineRoute({
  access: ['student', 'instructor', 'admin'],
  summary: 'The flow curves of a head, a port at a time, with the change against the baseline.',
  params: idParams,
}, ({ em, app, actor, params }) => listCurves(em, app, actor, params.id))
