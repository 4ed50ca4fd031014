import { pageQuery } from '#shared/contract/views'
import { listPeople } from '#server/services/people/list-people'
import { defineRoute } from '#server/utils/define-route'

export default defineRoute({
  access: ['admin'],
  summary: 'Everybody with an account, by name.',
  query: pageQuery,
}, async ({ em, query }) => listPeople(em, query))
