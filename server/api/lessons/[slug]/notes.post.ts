import { addNote } from '#server/services/lessons/add-note'
import { defineRoute } from '#server/utils/define-route'
import { noteInput, slugParams } from '#shared/contract/lessons'

export default defineRoute({
  access: ['student', 'instructor', 'admin', 'safety'],
  summary: 'A note of the caller\'s own at a heading of a lesson, or at its top.',
  params: slugParams,
  body: noteInput,
  status: 201,
  keeps: true,
}, async ({ em, app, actor, params, body }) => addNote(em, app, actor, params.slug, body))
