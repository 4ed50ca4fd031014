import { quoteRefund } from '#server/services/money/quote-refund'
import { findPlace } from '#server/services/places/find-place'
import { defineRoute } from '#server/utils/define-route'
import { idParams } from '#shared/contract/inputs'
import { refundQuery } from '#shared/contract/places'

export default defineRoute({
  access: ['admin'],
  summary: 'What giving up a place would give back, by which rule. Changes nothing.',
  params: idParams,
  query: refundQuery,
}, async ({ em, app, params, query }) => quoteRefund(em, app, await findPlace(em, params.id), query))
