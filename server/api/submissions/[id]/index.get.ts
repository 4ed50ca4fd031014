import { viewSubmission } from '#server/services/submissions/view-submission'
import { defineRoute } from '#server/utils/define-route'
import { idParams } from '#shared/contract/inputs'

export default defineRoute({
  access: ['student', 'instructor', 'admin'],
  summary: 'A submission with its evidence, what is wanted, and its newest results.',
  params: idParams,
}, ({ em, app, actor, params }) => viewSubmission(em, app, actor, params.id))
