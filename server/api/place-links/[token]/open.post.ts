import { openPlace } from '#server/services/places/open-place'
import { viewLinkedPlace } from '#server/services/places/view-linked-place'
import { definePublicRoute } from '#server/utils/define-public-route'
import { linkParams } from '#shared/contract/places'

export default definePublicRoute({
  why: 'Who has the mailed link has no account yet.',
  summary: 'Opens a mailed link: holds a free place, or takes the turn on the waiting list.',
  params: linkParams,
}, async ({ em, app, params }) => {
  await openPlace(em, app, params.token)
  return viewLinkedPlace(em.fork(), app, params.token)
})
