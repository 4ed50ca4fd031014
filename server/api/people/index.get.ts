import { peopleQuery } from '#shared/contract/office'
import { listPeople } from '#server/services/people/list-people'
import { defineRoute } from '#server/utils/define-route'

export default defineRoute({
  access: ['admin'],
  summary: 'Everybody with an account; searched, ordered, a page at a time.',
  query: peopleQuery,
}, async ({ em, query }) => listPeople(em, query))
