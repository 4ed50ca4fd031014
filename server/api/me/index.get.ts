import { viewMe } from '#server/services/people/view-me'
import { defineRoute } from '#server/utils/define-route'

export default defineRoute({
  access: ['student', 'instructor', 'admin', 'safety'],
  summary: 'The signed-in person, their roles and bench places.',
}, ({ em, actor }) => viewMe(em, actor))
