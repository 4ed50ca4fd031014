import { makeCohort } from '#server/services/places/save-cohort'
import { defineRoute } from '#server/utils/define-route'
import { cohortInput } from '#shared/contract/places'

export default defineRoute({
  access: ['admin'],
  summary: 'Makes a cohort with its dates, benches and prices.',
  body: cohortInput,
  status: 201,
  keeps: true,
}, async ({ em, actor, body }) => makeCohort(em, actor, body))
