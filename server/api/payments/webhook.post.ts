import { getRequestHeader } from 'h3'
import { keepPaymentMessage } from '#server/services/money/keep-payment-message'
import { definePublicRoute } from '#server/utils/define-public-route'
import { readBodyWithin } from '#server/utils/read-body'

/** The processor's messages are far smaller. */
const maxBytes = 256 * 1024

export default definePublicRoute({
  why: 'The card processor has no account; its signature over the raw body says who it is.',
  summary: 'Takes a signed message of the card processor, once, and looks how the payment stands.',
}, async ({ event, app, em }) => {
  // The signature is over the bytes as they came, so nothing may read them as JSON before.
  const raw = await readBodyWithin(event, maxBytes)
  const message = app.payments.readWebhook(raw, getRequestHeader(event, 'stripe-signature'), app.clock.now())
  await keepPaymentMessage(em, app, message)
  return { received: true }
})
