import { addDocument } from '#server/services/documents/add-document'
import { defineRoute } from '#server/utils/define-route'
import { documentInput, idParams } from '#shared/contract/inputs'

export default defineRoute({
  access: ['student', 'instructor'],
  summary: 'Files a received upload as a document of this submission.',
  params: idParams,
  body: documentInput,
  status: 201,
  keeps: true,
}, async ({ em, app, actor, params, body }) => addDocument(em, app, actor, params.id, body))
