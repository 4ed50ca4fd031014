import { saveTrack } from '#server/services/media/save-track'
import { defineRoute } from '#server/utils/define-route'
import { idParams } from '#shared/contract/inputs'
import { longestTrack, trackInput } from '#shared/contract/media'

export default defineRoute({
  access: ['instructor'],
  summary: 'Keeps a film\'s captions or chapters in one language, in the place of those it had; mistakes are named by line.',
  params: idParams,
  body: trackInput,
  // A character has at most six bytes in JSON.
  maxBytes: longestTrack * 6 + 1000,
  keeps: true,
}, async ({ em, actor, params, body }) => saveTrack(em, actor, params.id, body))
