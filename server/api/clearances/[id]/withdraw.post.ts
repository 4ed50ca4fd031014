import { withdrawClearance } from '#server/services/safety/withdraw-clearance'
import { defineRoute } from '#server/utils/define-route'
import { idParams } from '#shared/contract/inputs'

export default defineRoute({
  access: ['safety'],
  summary: 'Takes a clearance back; counts at once.',
  params: idParams,
  keeps: true,
}, async ({ em, app, actor, params }) => withdrawClearance(em, app, actor, params.id))
