import { listVersions } from '#server/services/lessons/list-versions'
import { defineRoute } from '#server/utils/define-route'
import { slugParams } from '#shared/contract/lessons'

export default defineRoute({
  access: ['student', 'instructor', 'admin', 'safety'],
  summary: 'Every version of a lesson, newest first, with what changed and why.',
  params: slugParams,
}, async ({ em, app, actor, params }) => listVersions(em, app, actor, params.slug))
