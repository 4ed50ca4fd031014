import { createEventStream, getRequestHeader } from 'h3'
import { followSubmission } from '#server/services/submissions/follow-submission'
import { defineRoute } from '#server/utils/define-route'
import { idParams } from '#shared/contract/inputs'

export default defineRoute({
  access: ['student', 'instructor', 'admin'],
  summary: 'Server-sent events: the submission\'s state at once and whenever it changes. At most four at a time a person.',
  params: idParams,
}, async ({ event, app, actor, params }) => {
  const stream = createEventStream(event)
  const stop = await followSubmission({
    app,
    actor,
    submissionId: params.id,
    lastSeen: getRequestHeader(event, 'last-event-id') ?? null,
    push: message => stream.push(message),
    end: () => void stream.close().catch(() => undefined),
  })
  stream.onClosed(stop)
  return stream.send()
})
