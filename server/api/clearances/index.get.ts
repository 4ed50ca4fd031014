import { listClearances } from '#server/services/safety/list-clearances'
import { defineRoute } from '#server/utils/define-route'
import { clearancesQuery } from '#shared/contract/safety'

export default defineRoute({
  access: ['safety', 'admin'],
  summary: 'Who may use which tool, until when, and who has not signed the safety form.',
  query: clearancesQuery,
}, async ({ em, app, query }) => listClearances(em, app, query))
