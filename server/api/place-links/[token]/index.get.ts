import { viewLinkedPlace } from '#server/services/places/view-linked-place'
import { definePublicRoute } from '#server/utils/define-public-route'
import { linkParams } from '#shared/contract/places'

export default definePublicRoute({
  why: 'Who has the mailed link has no account yet.',
  summary: 'A place as its mailed link shows it. Looking holds nothing.',
  params: linkParams,
}, async ({ em, app, params }) => viewLinkedPlace(em, app, params.token))
