import { setResponseStatus } from 'h3'
import { z } from 'zod'
import { checkHealth } from '#server/services/school/check-health'
import { definePublicRoute } from '#server/utils/define-public-route'

export default definePublicRoute({
  why: 'Whatever watches over the process has no account.',
  summary: 'Whether database, storage and jobs answer; 503 when one does not.',
  answer: z.object({ ok: z.boolean(), database: z.boolean(), storage: z.boolean(), jobs: z.boolean() }),
}, async ({ event, app }) => {
  const health = await checkHealth(app)
  if (!health.ok) setResponseStatus(event, 503)
  return health
})
