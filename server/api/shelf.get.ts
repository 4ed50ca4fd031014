import { viewShelf } from '#server/services/lessons/view-shelf'
import { defineRoute } from '#server/utils/define-route'

export default defineRoute({
  access: ['student'],
  summary: 'The modules of the courses the caller took, while access runs, and where they stopped.',
}, async ({ em, app, actor }) => viewShelf(em, app, actor))
