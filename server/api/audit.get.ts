import { auditQuery } from '#shared/contract/office'
import { listEvents } from '#server/services/audit/list-events'
import { defineRoute } from '#server/utils/define-route'

export default defineRoute({
  access: ['admin', 'instructor', 'safety'],
  summary: 'The audit record: all of it for an admin, own cohorts for an instructor, safety for the safety officer.',
  query: auditQuery,
}, async ({ em, app, actor, query }) => listEvents(em, app, actor, query))
