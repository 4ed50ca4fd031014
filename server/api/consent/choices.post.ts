import { chooseSharing } from '#server/services/safety/choose-sharing'
import { defineRoute } from '#server/utils/define-route'
import { choiceInput } from '#shared/contract/safety'

export default defineRoute({
  access: ['student', 'instructor', 'admin', 'safety'],
  summary: 'Says yes or no to one kind of sharing; counts at once.',
  body: choiceInput,
  keeps: true,
}, async ({ em, app, actor, body }) => chooseSharing(em, app, actor, body))
