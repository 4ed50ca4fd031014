import { viewDraft } from '#server/services/lessons/view-draft'
import { defineRoute } from '#server/utils/define-route'
import { slugParams } from '#shared/contract/lessons'

export default defineRoute({
  access: ['instructor'],
  summary: 'A lesson as it is being written; what is published where nobody has begun. Makes nothing.',
  params: slugParams,
}, async ({ em, params }) => viewDraft(em, params.slug))
