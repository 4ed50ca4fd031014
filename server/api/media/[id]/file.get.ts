import { sendRedirect } from 'h3'
import { showMedia } from '#server/services/media/show-media'
import { defineRoute } from '#server/utils/define-route'
import { idParams } from '#shared/contract/inputs'

export default defineRoute({
  access: ['student', 'instructor', 'admin', 'safety'],
  summary: 'Sends on to a 60 second address of the picture or film, where any range of it may be asked for.',
  params: idParams,
}, async ({ event, em, app, actor, params }) => sendRedirect(event, (await showMedia(em, app, actor, params.id)).url, 302))
