import { takeOrder } from '#server/services/places/take-order'
import { viewPlace } from '#server/services/places/view-place'
import { defineRoute } from '#server/utils/define-route'
import { idParams } from '#shared/contract/inputs'
import { orderInput } from '#shared/contract/places'

export default defineRoute({
  access: ['admin'],
  summary: 'Takes a sponsor\'s purchase order: the place is confirmed from the order on.',
  params: idParams,
  body: orderInput,
  status: 201,
  keeps: true,
}, async ({ em, app, actor, params, body }) => {
  await takeOrder(em, app, actor, params.id, body)
  return viewPlace(em, params.id)
})
