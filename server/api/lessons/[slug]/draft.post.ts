import { saveDraft } from '#server/services/lessons/save-draft'
import { defineRoute } from '#server/utils/define-route'
import { draftSaveInput, largestDocument, slugParams } from '#shared/contract/lessons'

export default defineRoute({
  access: ['instructor'],
  summary: 'Keeps a lesson as written so far, over the revision seen; 409 draft_stale with `theirs` when somebody saved since.',
  params: slugParams,
  body: draftSaveInput,
  keeps: true,
  maxBytes: largestDocument,
}, async ({ em, actor, params, body }) => saveDraft(em, actor, params.slug, body))
