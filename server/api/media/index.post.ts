import { addMedia } from '#server/services/media/add-media'
import { defineRoute } from '#server/utils/define-route'
import { mediaInput } from '#shared/contract/media'

export default defineRoute({
  access: ['instructor'],
  summary: 'Makes an upload a picture or film that lessons may show.',
  body: mediaInput,
  status: 201,
  keeps: true,
}, async ({ em, app, actor, body }) => addMedia(em, app, actor, body))
