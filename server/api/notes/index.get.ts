import { listNotes } from '#server/services/lessons/list-notes'
import { defineRoute } from '#server/utils/define-route'

export default defineRoute({
  access: ['student', 'instructor', 'admin', 'safety'],
  summary: 'All the caller\'s own notes, newest first; also once access to the lessons has ended.',
}, async ({ em, actor }) => listNotes(em, actor))
