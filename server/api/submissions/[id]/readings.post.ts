import { recordReading } from '#server/services/readings/record-reading'
import { defineRoute } from '#server/utils/define-route'
import { idParams, readingInput } from '#shared/contract/inputs'

export default defineRoute({
  access: ['student', 'instructor'],
  summary: 'Keeps a reading of one quantity at one spot, its repeats exactly as typed.',
  params: idParams,
  body: readingInput,
  status: 201,
  keeps: true,
}, async ({ em, app, actor, params, body }) => recordReading(em, app, actor, params.id, body))
