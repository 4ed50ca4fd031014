import { BenchPlace } from '#server/db/entities/BenchPlace'
import { Payment, type PaymentPurpose } from '#server/db/entities/Payment'
import { placeLink } from '#server/services/places/place-link'
import type { App } from '#server/utils/app'

const words: Record<PaymentPurpose, string> = { deposit: 'Deposit for a bench place', balance: 'Balance for a bench place', renewal: 'A further year of the lessons' }
/** The processor's clock need not be ours. */
const clockMs = 5 * 60_000

/**
 * The processor's page of a payment that has none yet, or the one it has. Everything asked for comes from the row, so that asking
 * again after a cut is the same question under the same key.
 *
 * @returns its address; null when the payment is over, or the processor will not open it
 * @throws {AdapterRefusal} payments_unreachable
 */
export async function openCheckout(app: App, paymentId: string): Promise<string | null> {
  const em = app.orm.em.fork()
  const payment = await em.findOneOrFail(Payment, paymentId)
  if (payment.state !== 'begun') return payment.state === 'open' ? payment.url ?? null : null
  const place = await em.findOneOrFail(BenchPlace, { id: payment.place.id }, { populate: ['cohort', 'person'] })
  const link = placeLink(app, place)
  const started = await app.payments.startCheckout({
    key: `checkout:${payment.id}`,
    reference: payment.id,
    amountMinor: payment.amountMinor,
    currency: payment.currency,
    what: `${words[payment.purpose]}, ${place.cohort.$.name}`,
    email: place.person?.$.email || place.email || null,
    successUrl: `${link}?paid=1`,
    cancelUrl: `${link}?declined=1`,
    expiresAt: payment.expiresAt,
  })
  const found = started.state === 'open' ? started : await findEarlier(app, payment)
  // Where the answer was lost, and the name or the link changed since, the page is there and nobody was ever sent to it.
  const change = found ? { state: 'open' as const, sessionId: found.sessionId, url: found.url, expiresAt: found.expiresAt } : { state: 'expired' as const }
  const changed = await em.nativeUpdate(Payment, { id: payment.id, state: 'begun' }, change)
  if (changed > 0) return found?.url ?? null
  // Somebody else was quicker with the same page.
  const now = await em.fork().findOneOrFail(Payment, paymentId)
  return now.state === 'open' ? now.url ?? null : null
}

async function findEarlier(app: App, payment: Payment): Promise<{ sessionId: string, url: string | null, expiresAt: Date } | null> {
  const sessionId = await app.payments.findCheckout(payment.id, new Date(payment.createdAt.getTime() - clockMs))
  if (sessionId === null) return null
  const { url, expiresAt } = await app.payments.readCheckout(sessionId)
  return { sessionId, url, expiresAt }
}
