import { removeNote } from '#server/services/lessons/remove-note'
import { defineRoute } from '#server/utils/define-route'
import { noteParams } from '#shared/contract/lessons'

export default defineRoute({
  access: ['student', 'instructor', 'admin', 'safety'],
  summary: 'Takes a note of the caller\'s own away for good.',
  params: noteParams,
}, async ({ em, actor, params }) => {
  await removeNote(em, actor, params.id)
  return { removed: 1 }
})
