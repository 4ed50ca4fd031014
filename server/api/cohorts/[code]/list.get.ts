import { viewCohortList } from '#server/services/places/view-cohort-list'
import { defineRoute } from '#server/utils/define-route'
import { cohortParams } from '#shared/contract/places'

export default defineRoute({
  access: ['admin', 'instructor'],
  summary: 'The people of a cohort for print: bench, head, safety form and clearances.',
  params: cohortParams,
}, async ({ em, app, actor, params }) => viewCohortList(em, app, actor, params.code))
