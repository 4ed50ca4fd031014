import { listNotes } from '#server/services/lessons/list-notes'
import { defineRoute } from '#server/utils/define-route'
import { slugParams } from '#shared/contract/lessons'

export default defineRoute({
  access: ['student', 'instructor', 'admin', 'safety'],
  summary: 'The caller\'s own notes in a lesson, newest first.',
  params: slugParams,
}, async ({ em, actor, params }) => listNotes(em, actor, params.slug))
