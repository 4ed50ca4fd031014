import { setResponseStatus } from 'h3'
import { startDraft } from '#server/services/submissions/start-draft'
import { defineRoute } from '#server/utils/define-route'
import { draftInput, stageParams } from '#shared/contract/inputs'

export default defineRoute({
  access: ['student', 'instructor'],
  summary: 'Makes the draft of the part of a stage that is due (201), or gives the one there is (200).',
  params: stageParams,
  body: draftInput,
  status: 201,
  keeps: true,
}, async ({ event, em, app, actor, params, body }) => {
  const { submission, made } = await startDraft(em, app, actor, params.id, params.op, body)
  if (!made) setResponseStatus(event, 200)
  return { id: submission.id, op: submission.op, part: submission.part, point: submission.point ?? null, try: submission.tryNumber, version: submission.version, state: submission.state, ports: submission.ports }
})
