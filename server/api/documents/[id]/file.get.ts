import { sendRedirect } from 'h3'
import { saveDocument } from '#server/services/documents/save-document'
import { defineRoute } from '#server/utils/define-route'
import { idParams } from '#shared/contract/inputs'

export default defineRoute({
  access: ['student', 'instructor'],
  summary: 'Sends on to a 60 second address that saves the document.',
  params: idParams,
}, async ({ event, em, app, actor, params }) => sendRedirect(event, (await saveDocument(em, app, actor, params.id)).url, 302))
