import { takePlaceStep } from '#server/services/places/take-place-step'
import { viewPlace } from '#server/services/places/view-place'
import { defineRoute } from '#server/utils/define-route'
import { idParams } from '#shared/contract/inputs'
import { placeStepInput } from '#shared/contract/places'

export default defineRoute({
  access: ['admin'],
  summary: 'Takes one step of a place: offer, withdraw the offer, here, finish, stop.',
  params: idParams,
  body: placeStepInput,
  keeps: true,
}, async ({ em, app, actor, params, body }) => {
  await takePlaceStep(em, app, actor, params.id, body)
  return viewPlace(em, params.id)
})
