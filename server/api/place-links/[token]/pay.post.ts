import { beginToPay } from '#server/services/places/begin-to-pay'
import { definePublicRoute } from '#server/utils/define-public-route'
import { linkParams, payInput } from '#shared/contract/places'

export default definePublicRoute({
  why: 'Who has the mailed link has no account yet.',
  summary: 'Begins to pay by card: the address of the processor\'s page. For the deposit the hold grows to 48 hours.',
  params: linkParams,
  body: payInput,
}, async ({ em, app, params, body }) => beginToPay(em, app, params.token, body.purpose))
