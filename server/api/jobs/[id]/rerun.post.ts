import { rerunJob } from '#server/services/jobs/rerun-job'
import { defineRoute } from '#server/utils/define-route'
import { idParams } from '#shared/contract/inputs'

export default defineRoute({
  access: ['admin'],
  summary: 'Puts stuck work into the queue again.',
  params: idParams,
  status: 202,
}, async ({ em, app, actor, params }) => {
  await rerunJob(em, app, actor, params.id)
  return { again: true }
})
