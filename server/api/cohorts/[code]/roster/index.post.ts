import { takeRoster } from '#server/services/places/take-roster'
import { defineRoute } from '#server/utils/define-route'
import { cohortParams, rosterTakeInput } from '#shared/contract/places'

export default defineRoute({
  access: ['admin'],
  summary: 'Takes a list of people into a cohort, exactly as it was previewed, all rows or none.',
  params: cohortParams,
  body: rosterTakeInput,
  status: 201,
  keeps: true,
  maxBytes: 1_100_000,
}, async ({ em, app, actor, params, body }) => takeRoster(em, app, actor, params.code, body))
