import { listLessons } from '#server/services/lessons/list-lessons'
import { defineRoute } from '#server/utils/define-route'

export default defineRoute({
  access: ['student', 'instructor', 'admin', 'safety'],
  summary: 'The lessons the caller may read, in order, each at the version they read; instructors see unpublished ones too.',
}, async ({ em, app, actor }) => listLessons(em, app, actor))
