import { z } from 'zod'
import { setPhotoAside } from '#server/services/photos/set-photo-aside'
import { defineRoute } from '#server/utils/define-route'
import { idParams } from '#shared/contract/inputs'

export default defineRoute({
  access: ['student', 'instructor'],
  summary: 'Takes a photo out of the evidence; it is kept and no longer counts.',
  params: idParams,
  body: z.object({}).strict(),
  keeps: true,
}, async ({ em, app, actor, params }) => setPhotoAside(em, app, actor, params.id))
