import { listCastings } from '#server/services/castings/list-castings'
import { defineRoute } from '#server/utils/define-route'

export default defineRoute({
  access: ['student', 'instructor', 'admin', 'safety'],
  summary: 'The newest card of each casting with every nominal.',
}, async ({ em }) => listCastings(em))
