import { giveClearance } from '#server/services/safety/give-clearance'
import { defineRoute } from '#server/utils/define-route'
import { clearanceInput } from '#shared/contract/safety'

export default defineRoute({
  access: ['safety'],
  summary: 'Clears a person for a tool to the end of a day.',
  body: clearanceInput,
  status: 201,
  keeps: true,
}, async ({ em, app, actor, body }) => giveClearance(em, app, actor, body))
