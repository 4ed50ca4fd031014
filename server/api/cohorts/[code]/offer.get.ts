import { viewOffer } from '#server/services/places/view-offer'
import { definePublicRoute } from '#server/utils/define-public-route'
import { cohortParams } from '#shared/contract/places'

export default definePublicRoute({
  why: 'Who thinks of asking for a place has no account yet.',
  summary: 'A cohort as a stranger sees it: dates, places left, price, and when money comes back.',
  params: cohortParams,
}, async ({ em, app, params }) => viewOffer(em, app, params.code))
