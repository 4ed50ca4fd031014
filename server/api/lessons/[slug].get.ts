import { z } from 'zod'
import { viewLesson } from '#server/services/lessons/view-lesson'
import { defineRoute } from '#server/utils/define-route'

export default defineRoute({
  access: ['student', 'instructor', 'admin', 'safety'],
  summary: 'A lesson as its newest version says it, as HTML.',
  params: z.object({ slug: z.string().regex(/^[a-z0-9]+(-[a-z0-9]+)*$/).max(80) }),
}, async ({ em, params }) => viewLesson(em, params.slug))
