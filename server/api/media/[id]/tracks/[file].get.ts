import { setResponseHeader } from 'h3'
import { showTrack } from '#server/services/media/show-track'
import { defineRoute } from '#server/utils/define-route'
import { trackFileParams, trackFileQuery } from '#shared/contract/media'

export default defineRoute({
  access: ['student', 'instructor', 'admin', 'safety'],
  summary: 'Captions or chapters of a film as WebVTT: captions.vtt or chapters.vtt.',
  params: trackFileParams,
  query: trackFileQuery,
}, async ({ event, em, app, actor, params, query }) => {
  const vtt = await showTrack(em, app, actor, params.id, params.file === 'captions.vtt' ? 'captions' : 'chapters', query.language)
  setResponseHeader(event, 'content-type', 'text/vtt; charset=utf-8')
  setResponseHeader(event, 'x-content-type-options', 'nosniff')
  return vtt
})
