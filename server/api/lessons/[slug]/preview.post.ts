import { previewLesson } from '#server/services/lessons/preview-lesson'
import { defineRoute } from '#server/utils/define-route'
import { largestDocument, previewInput, slugParams } from '#shared/contract/lessons'

export default defineRoute({
  access: ['instructor'],
  summary: 'A text as students would see it, and what publishing it would refuse; keeps nothing.',
  params: slugParams,
  body: previewInput,
  maxBytes: largestDocument,
}, async ({ em, actor, params, body }) => previewLesson(em, actor, params.slug, body))
