import { movePlace } from '#server/services/places/move-place'
import { viewPlace } from '#server/services/places/view-place'
import { defineRoute } from '#server/utils/define-route'
import { idParams } from '#shared/contract/inputs'
import { moveInput } from '#shared/contract/places'

export default defineRoute({
  access: ['admin'],
  summary: 'Moves a booked place to another cohort, once, with what was paid; answers the new place.',
  params: idParams,
  body: moveInput,
  status: 201,
  keeps: true,
}, async ({ em, app, actor, params, body }) => viewPlace(em, await movePlace(em, app, actor, params.id, body)))
