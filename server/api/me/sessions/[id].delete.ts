import { endOwnSession } from '#server/services/people/end-own-session'
import { defineRoute } from '#server/utils/define-route'
import { idParams } from '#shared/contract/inputs'

export default defineRoute({
  access: ['student', 'instructor', 'admin', 'safety'],
  summary: 'Ends one of the caller’s own sign-ins.',
  params: idParams,
}, async ({ em, actor, params }) => {
  await endOwnSession(em, actor, params.id)
  return { ended: 1 }
})
