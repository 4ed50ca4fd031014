import { saveRubric } from '#server/services/rubrics/save-rubric'
import { defineRoute } from '#server/utils/define-route'
import { rubricInput } from '#shared/contract/rubric-input'

export default defineRoute({
  access: ['instructor'],
  summary: 'Saves a rubric as the next version, unless a must in it has no acceptable value.',
  body: rubricInput,
  status: 201,
  keeps: true,
  maxBytes: 2 * 1024 ** 2,
}, async ({ em, app, actor, body }) => saveRubric(em, app, actor, body))
