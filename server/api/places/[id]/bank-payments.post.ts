import { takeBankPayment } from '#server/services/money/take-bank-payment'
import { viewPlace } from '#server/services/places/view-place'
import { defineRoute } from '#server/utils/define-route'
import { idParams } from '#shared/contract/inputs'
import { bankInput } from '#shared/contract/places'

export default defineRoute({
  access: ['admin'],
  summary: 'Writes down money that came by bank for a place, once by its reference.',
  params: idParams,
  body: bankInput,
  status: 201,
  keeps: true,
}, async ({ em, app, actor, params, body }) => {
  await takeBankPayment(em, app, actor, params.id, body)
  return viewPlace(em, params.id)
})
