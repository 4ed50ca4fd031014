import { endSessions } from '#server/services/people/sign-in'
import { defineRoute } from '#server/utils/define-route'

export default defineRoute({
  access: ['student', 'instructor', 'admin', 'safety'],
  summary: 'Ends every sign-in of the caller, this one too.',
}, async ({ em, actor }) => ({ ended: await endSessions(em, { userId: actor.id }, actor.id) }))
