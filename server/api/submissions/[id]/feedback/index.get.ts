import { viewFeedback } from '#server/services/feedback/view-feedback'
import { defineRoute } from '#server/utils/define-route'
import { idParams } from '#shared/contract/inputs'

export default defineRoute({
  access: ['student', 'instructor'],
  summary: 'What was said of one submission, oldest first.',
  params: idParams,
}, async ({ em, app, actor, params }) => ({ items: await viewFeedback(em, app, actor, params.id), next: null }))
