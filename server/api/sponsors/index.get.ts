import { listSponsors } from '#server/services/places/list-sponsors'
import { defineRoute } from '#server/utils/define-route'

export default defineRoute({
  access: ['admin'],
  summary: 'Sponsors by name.',
}, async ({ em }) => ({ items: await listSponsors(em) }))
