import { keepPosition } from '#server/services/media/keep-position'
import { defineRoute } from '#server/utils/define-route'
import { idParams } from '#shared/contract/inputs'
import { positionInput } from '#shared/contract/media'

export default defineRoute({
  access: ['student', 'instructor', 'admin', 'safety'],
  summary: 'Keeps where the caller stopped in a film.',
  params: idParams,
  body: positionInput,
}, async ({ em, app, actor, params, body }) => keepPosition(em, app, actor, params.id, body))
