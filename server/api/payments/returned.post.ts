import { comeBack } from '#server/services/money/come-back'
import { definePublicRoute } from '#server/utils/define-public-route'
import { returnedInput } from '#shared/contract/money'

export default definePublicRoute({
  why: 'Whoever comes back from paying has a place\'s mailed link and no account yet.',
  summary: 'Looks at once how the payments of a place stand, by its mailed link, instead of waiting for the card processor\'s message.',
  body: returnedInput,
}, async ({ em, app, body }) => comeBack(em, app, body.token))
