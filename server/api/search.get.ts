import { searchLessons } from '#server/services/lessons/search-lessons'
import { defineRoute } from '#server/utils/define-route'
import { searchQuery } from '#shared/contract/lessons'

export default defineRoute({
  access: ['student', 'instructor', 'admin', 'safety'],
  summary: 'Searches what the lessons say and what is said in their films; each hit opens at its heading or second.',
  query: searchQuery,
}, async ({ em, app, actor, query }) => searchLessons(em, app, actor, query))
