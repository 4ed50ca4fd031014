import { listOwnPlaces } from '#server/services/places/list-own-places'
import { defineRoute } from '#server/utils/define-route'

export default defineRoute({
  access: ['student', 'instructor', 'admin', 'safety'],
  summary: 'One\'s own places with their money and receipts, latest cohort first.',
}, async ({ em, app, actor }) => ({ items: await listOwnPlaces(em, app, actor) }))
