import { getRequestIP } from 'h3'
import { askForPlace } from '#server/services/places/ask-for-place'
import { definePublicRoute } from '#server/utils/define-public-route'
import { cohortParams, placeAskInput } from '#shared/contract/places'

export default definePublicRoute({
  why: 'An ask is what makes somebody known to the school.',
  summary: 'Keeps an ask for a place and mails the link that holds it; the answer never tells whether the address is known.',
  params: cohortParams,
  body: placeAskInput,
  status: 202,
}, async ({ event, em, app, params, body }) => askForPlace(em, app, params.code, body, getRequestIP(event) ?? 'unknown'))
