import { passOffer } from '#server/services/places/pass-offer'
import { viewLinkedPlace } from '#server/services/places/view-linked-place'
import { definePublicRoute } from '#server/utils/define-public-route'
import { linkParams } from '#shared/contract/places'

export default definePublicRoute({
  why: 'Who has the mailed link has no account yet.',
  summary: 'Lets an offer go; the turn on the list stays.',
  params: linkParams,
}, async ({ em, app, params }) => {
  await passOffer(em, app, params.token)
  return viewLinkedPlace(em.fork(), app, params.token)
})
