import { changeCohort } from '#server/services/places/save-cohort'
import { defineRoute } from '#server/utils/define-route'
import { cohortChange, cohortParams } from '#shared/contract/places'

export default defineRoute({
  access: ['admin'],
  summary: 'Changes what is named of a cohort; benches that come with it go to the waiting list first.',
  params: cohortParams,
  body: cohortChange,
  keeps: true,
}, async ({ em, app, actor, params, body }) => changeCohort(em, app, actor, params.code, body))
