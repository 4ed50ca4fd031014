import { listHeads } from '#server/services/heads/list-heads'
import { defineRoute } from '#server/utils/define-route'
import { pageQuery } from '#shared/contract/views'

export default defineRoute({
  access: ['student', 'instructor', 'admin', 'safety'],
  summary: 'The caller\'s heads, or those of the cohorts they teach.',
  query: pageQuery,
}, ({ em, app, actor, query }) => listHeads(em, app, actor, query))
