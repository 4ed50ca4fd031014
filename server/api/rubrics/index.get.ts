import { listRubrics } from '#server/services/rubrics/list-rubrics'
import { defineRoute } from '#server/utils/define-route'

export default defineRoute({
  access: ['student', 'instructor', 'admin', 'safety'],
  summary: 'Every version of the rubric, newest first.',
}, async ({ em }) => listRubrics(em))
