import { previewRoster } from '#server/services/places/preview-roster'
import { defineRoute } from '#server/utils/define-route'
import { cohortParams, rosterInput } from '#shared/contract/places'

export default defineRoute({
  access: ['admin'],
  summary: 'Shows a list of people as it would be taken, with what is wrong by row. Keeps nothing.',
  params: cohortParams,
  body: rosterInput,
  maxBytes: 1_100_000,
}, async ({ em, params, body }) => previewRoster(em, params.code, body.csv))
