import { keepProgress } from '#server/services/lessons/keep-progress'
import { defineRoute } from '#server/utils/define-route'
import { progressInput, slugParams } from '#shared/contract/lessons'

export default defineRoute({
  access: ['student', 'instructor', 'admin', 'safety'],
  summary: 'Where the caller stopped in a lesson, and whether they marked it as read.',
  params: slugParams,
  body: progressInput,
  keeps: true,
}, async ({ em, app, actor, params, body }) => keepProgress(em, app, actor, params.slug, body))
