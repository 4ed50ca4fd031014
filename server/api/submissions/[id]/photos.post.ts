import { addPhoto } from '#server/services/photos/add-photo'
import { defineRoute } from '#server/utils/define-route'
import { idParams, photoInput } from '#shared/contract/inputs'

export default defineRoute({
  access: ['student', 'instructor'],
  summary: 'Files a received upload as a photo of this submission.',
  params: idParams,
  body: photoInput,
  status: 201,
  keeps: true,
}, async ({ em, app, actor, params, body }) => addPhoto(em, app, actor, params.id, body))
