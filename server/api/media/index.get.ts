import { listMedia } from '#server/services/media/list-media'
import { defineRoute } from '#server/utils/define-route'
import { mediaQuery } from '#shared/contract/media'

export default defineRoute({
  access: ['instructor'],
  summary: 'Pictures and films for lessons, newest first; q is looked for in their titles.',
  query: mediaQuery,
}, async ({ em, actor, query }) => listMedia(em, actor, query))
