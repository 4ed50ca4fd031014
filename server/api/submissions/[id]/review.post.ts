import { decideReview } from '#server/services/review/decide-review'
import { defineRoute } from '#server/utils/define-route'
import { idParams, reviewInput } from '#shared/contract/inputs'

export default defineRoute({
  access: ['instructor'],
  summary: 'Releases a point, sends the evidence back or stops the work, with overrides, pins and sentences for the student.',
  params: idParams,
  body: reviewInput,
  keeps: true,
  maxBytes: 1_048_576,
}, async ({ em, app, actor, params, body }) => decideReview(em, app, actor, params.id, body))
