import { readFeedback } from '#server/services/feedback/read-feedback'
import { defineRoute } from '#server/utils/define-route'
import { idParams } from '#shared/contract/inputs'

export default defineRoute({
  access: ['student'],
  summary: 'Notes that the student read what was said of a submission of their own.',
  params: idParams,
}, async ({ em, app, actor, params }) => readFeedback(em, app, actor, params.id))
