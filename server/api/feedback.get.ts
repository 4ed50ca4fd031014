import { listFeedback } from '#server/services/feedback/list-feedback'
import { defineRoute } from '#server/utils/define-route'
import { pageQuery } from '#shared/contract/views'

export default defineRoute({
  access: ['student'],
  summary: 'What instructors told the caller about their own work, newest first.',
  query: pageQuery,
}, async ({ em, actor, query }) => listFeedback(em, actor, query))
