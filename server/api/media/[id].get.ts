import { findMedia } from '#server/services/media/find-media'
import { viewMedia } from '#server/services/media/view-media'
import { defineRoute } from '#server/utils/define-route'
import { idParams } from '#shared/contract/inputs'

export default defineRoute({
  access: ['student', 'instructor', 'admin', 'safety'],
  summary: 'A picture or film of a lesson: its state, captions and chapters, and where the caller stopped in it.',
  params: idParams,
}, async ({ em, app, actor, params }) => (await viewMedia(em, actor.id, [await findMedia(em, app, actor, params.id)]))[0])
