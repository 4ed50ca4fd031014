import { recordReading } from '#server/services/readings/record-reading'
import { defineRoute } from '#server/utils/define-route'
import { idParams, readingInput } from '#shared/contract/inputs'

export default defineRoute({
  access: ['student', 'instructor'],
  summary: 'Keeps readings of one quantity at one spot, exactly as typed; several values are repeats.',
  params: idParams,
  body: readingInput,
  status: 201,
  keeps: true,
}, async ({ em, app, actor, params, body }) => recordReading(em, app, actor, params.id, body))
