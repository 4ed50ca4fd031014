import { liftStop } from '#server/services/review/lift-stop'
import { defineRoute } from '#server/utils/define-route'
import { idParams, liftInput } from '#shared/contract/inputs'

export default defineRoute({
  access: ['instructor', 'safety'],
  summary: 'Lifts a stop, with a reason.',
  params: idParams,
  body: liftInput,
  keeps: true,
}, async ({ em, app, actor, params, body }) => liftStop(em, app, actor, params.id, body))
