import { publishLesson } from '#server/services/lessons/publish-lesson'
import { defineRoute } from '#server/utils/define-route'
import { publishInput, slugParams } from '#shared/contract/lessons'

export default defineRoute({
  access: ['instructor'],
  summary: 'Makes the draft the next version, for good, with what changed and why; whoever is mid-head keeps theirs and is told.',
  params: slugParams,
  body: publishInput,
  status: 201,
  keeps: true,
}, async ({ em, app, actor, params, body }) => publishLesson(em, app, actor, params.slug, body))
