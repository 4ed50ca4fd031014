import { changeNote } from '#server/services/lessons/change-note'
import { defineRoute } from '#server/utils/define-route'
import { noteInput, noteParams } from '#shared/contract/lessons'

export default defineRoute({
  access: ['student', 'instructor', 'admin', 'safety'],
  summary: 'Changes a note of the caller\'s own.',
  params: noteParams,
  body: noteInput,
  keeps: true,
}, async ({ em, app, actor, params, body }) => changeNote(em, app, actor, params.id, body))
