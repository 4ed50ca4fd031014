import { completeUpload } from '#server/services/uploads/complete-upload'
import { defineRoute } from '#server/utils/define-route'
import { idParams, uploadCompleteInput } from '#shared/contract/inputs'

export default defineRoute({
  access: ['student', 'instructor'],
  summary: 'Says that everything was sent; size, SHA-256 and type are read again from storage.',
  params: idParams,
  body: uploadCompleteInput,
  keeps: true,
}, async ({ em, app, actor, params, body }) => completeUpload(em, app, actor, params.id, body.parts ?? []))
