import { listSessions } from '#server/services/people/list-sessions'
import { defineRoute } from '#server/utils/define-route'

export default defineRoute({
  access: ['student', 'instructor', 'admin', 'safety'],
  summary: 'The caller’s own sign-ins that still work.',
}, async ({ em, actor }) => ({ items: await listSessions(em, actor), next: null }))
