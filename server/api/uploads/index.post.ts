import { announceUpload } from '#server/services/uploads/announce-upload'
import { defineRoute } from '#server/utils/define-route'
import { uploadInput } from '#shared/contract/inputs'

export default defineRoute({
  access: ['student', 'instructor'],
  summary: 'Makes room for a file and answers the signed addresses it is sent to.',
  body: uploadInput,
  status: 201,
  keeps: true,
}, async ({ em, app, actor, body }) => announceUpload(em, app, actor, body))
