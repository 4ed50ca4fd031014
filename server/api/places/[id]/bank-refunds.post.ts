import { writeBankRefund } from '#server/services/money/write-bank-refund'
import { defineRoute } from '#server/utils/define-route'
import { idParams } from '#shared/contract/inputs'
import { bankRefundInput } from '#shared/contract/money'

export default defineRoute({
  access: ['admin'],
  summary: 'Writes down that a refund of this place went by bank, once by its reference.',
  params: idParams,
  body: bankRefundInput,
  status: 201,
  keeps: true,
}, async ({ em, app, actor, params, body }) => writeBankRefund(em, app, actor, params.id, body))
