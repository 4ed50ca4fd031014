import { viewPlace } from '#server/services/places/view-place'
import { defineRoute } from '#server/utils/define-route'
import { idParams } from '#shared/contract/inputs'

export default defineRoute({
  access: ['admin'],
  summary: 'A place with its history, its money, and the steps it may take now.',
  params: idParams,
}, async ({ em, params }) => viewPlace(em, params.id))
