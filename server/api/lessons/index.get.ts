import { listLessons } from '#server/services/lessons/list-lessons'
import { defineRoute } from '#server/utils/define-route'

export default defineRoute({
  access: ['student', 'instructor', 'admin', 'safety'],
  summary: 'The lessons of the course, in order.',
}, async ({ em }) => listLessons(em))
