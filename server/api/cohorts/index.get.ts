import { listCohorts } from '#server/services/places/list-cohorts'
import { defineRoute } from '#server/utils/define-route'

export default defineRoute({
  access: ['admin', 'instructor'],
  summary: 'Cohorts, latest start first: the office sees all, an instructor those taught now.',
}, async ({ em, app, actor }) => ({ items: await listCohorts(em, app, actor) }))
