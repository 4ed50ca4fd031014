import { listGauges } from '#server/services/submissions/list-gauges'
import { defineRoute } from '#server/utils/define-route'
import { idParams } from '#shared/contract/inputs'

export default defineRoute({
  access: ['student', 'instructor'],
  summary: 'Criteria, casting and standing readings of a submission, for the gauge on the reading pad.',
  params: idParams,
}, async ({ em, app, actor, params }) => listGauges(em, app, actor, params.id))
