import { refundByHand } from '#server/services/money/refund-by-hand'
import { defineRoute } from '#server/utils/define-route'
import { idParams } from '#shared/contract/inputs'
import { handRefundInput } from '#shared/contract/places'

export default defineRoute({
  access: ['admin'],
  summary: 'Gives back an amount of what was paid for a place, for a reason; never more than is left.',
  params: idParams,
  body: handRefundInput,
  status: 201,
  keeps: true,
}, async ({ em, app, actor, params, body }) => refundByHand(em, app, actor, params.id, body))
