import { sendRedirect } from 'h3'
import { z } from 'zod'
import { showPicture } from '#server/services/photos/show-picture'
import { defineRoute } from '#server/utils/define-route'
import { idParams } from '#shared/contract/inputs'

export default defineRoute({
  access: ['student', 'instructor', 'safety'],
  summary: 'Sends on to a 60 second address of the picture: small, large, or the original to be saved.',
  params: idParams,
  query: z.object({ size: z.enum(['thumb', 'preview', 'original']).default('preview') }),
}, async ({ event, em, app, actor, params, query }) => sendRedirect(event, (await showPicture(em, app, actor, params.id, query.size)).url, 302))
