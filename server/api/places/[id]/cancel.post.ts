import { cancelPlace } from '#server/services/places/cancel-place'
import { viewPlace } from '#server/services/places/view-place'
import { defineRoute } from '#server/utils/define-route'
import { idParams } from '#shared/contract/inputs'
import { cancelInput } from '#shared/contract/places'

export default defineRoute({
  access: ['admin'],
  summary: 'Ends a place; what was shown goes back by the rule, and the bench goes to the waiting list.',
  params: idParams,
  body: cancelInput,
  keeps: true,
}, async ({ em, app, actor, params, body }) => {
  await cancelPlace(em, app, actor, params.id, body)
  return viewPlace(em, params.id)
})
