import { changeSafetyNote } from '#server/services/safety/change-safety-note'
import { defineRoute } from '#server/utils/define-route'
import { safetyNoteInput } from '#shared/contract/safety'

export default defineRoute({
  access: ['student', 'instructor', 'admin', 'safety'],
  summary: 'Changes or empties one\'s first-aid words and boot size.',
  body: safetyNoteInput,
  keeps: true,
}, async ({ em, app, actor, body }) => changeSafetyNote(em, app, actor, body))
