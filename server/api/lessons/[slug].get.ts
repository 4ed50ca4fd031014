import { viewLesson } from '#server/services/lessons/view-lesson'
import { defineRoute } from '#server/utils/define-route'
import { slugParams, versionQuery } from '#shared/contract/lessons'

export default defineRoute({
  access: ['student', 'instructor', 'admin', 'safety'],
  summary: 'A lesson as HTML: the version the caller keeps to while a head is under way, else the newest; or the version asked for.',
  params: slugParams,
  query: versionQuery,
}, async ({ em, app, actor, params, query }) => viewLesson(em, app, actor, params.slug, query.version))
