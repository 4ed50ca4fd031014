import { seeWitness } from '#server/services/review/see-witness'
import { defineRoute } from '#server/utils/define-route'
import { pointParams } from '#shared/contract/inputs'

export default defineRoute({
  access: ['instructor', 'safety'],
  summary: 'Says that the caller came and saw a witness point.',
  params: pointParams,
}, async ({ em, app, actor, params }) => seeWitness(em, app, actor, params.id, params.code))
