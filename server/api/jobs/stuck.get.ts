import { listStuckJobs } from '#server/services/jobs/list-stuck-jobs'
import { defineRoute } from '#server/utils/define-route'

export default defineRoute({
  access: ['admin'],
  summary: 'Work that failed or keeps failing, with what it said.',
}, async ({ em }) => ({ items: await listStuckJobs(em), next: null }))
