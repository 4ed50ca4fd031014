import { askForRelease } from '#server/services/submissions/ask-for-release'
import { defineRoute } from '#server/utils/define-route'
import { askInput, idParams } from '#shared/contract/inputs'

export default defineRoute({
  access: ['student', 'instructor'],
  summary: 'Asks for the release of a submission; it is scored at once. Asked again, it answers the same.',
  params: idParams,
  body: askInput,
  status: 202,
  keeps: true,
}, async ({ em, app, actor, params, body }) => {
  const submission = await askForRelease(em, app, actor, params.id, body.note)
  return { id: submission.id, version: submission.version, state: submission.state, askedAt: submission.askedAt?.toISOString() ?? null }
})
