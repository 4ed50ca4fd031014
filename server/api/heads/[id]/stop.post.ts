import { stopHead } from '#server/services/review/stop-head'
import { defineRoute } from '#server/utils/define-route'
import { idParams, stopInput } from '#shared/contract/inputs'

export default defineRoute({
  access: ['instructor', 'safety'],
  summary: 'Stops work on a head at once.',
  params: idParams,
  body: stopInput,
  status: 201,
  keeps: true,
}, async ({ em, app, actor, params, body }) => stopHead(em, app, actor, params.id, body))
