import { listPlaces } from '#server/services/places/list-places'
import { defineRoute } from '#server/utils/define-route'
import { placesQuery } from '#shared/contract/places'

export default defineRoute({
  access: ['admin'],
  summary: 'Every place of the school, a page at a time, by name, e-mail, sponsor, cohort or state.',
  query: placesQuery,
}, async ({ em, query }) => listPlaces(em, query))
