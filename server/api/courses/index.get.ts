import { listCourses } from '#server/services/places/list-courses'
import { definePublicRoute } from '#server/utils/define-public-route'

export default definePublicRoute({
  why: 'Who thinks of learning here has no account yet.',
  summary: 'What the school teaches, with the cohorts that take asks.',
}, async ({ em, app }) => ({ items: await listCourses(em, app) }))
