import type { EntityManager } from '@mikro-orm/postgresql'
import { firstName } from '#server/services/mail/first-name'
import { placeHeld } from '#server/services/mail/templates/place-held'
import { writeMail } from '#server/services/mail/write-mail'
import { beginPayment } from '#server/services/money/begin-payment'
import type { App } from '#server/utils/app'
import { Refusal } from '#server/utils/refusal'
import type { PayAnswer } from '#shared/contract/places'
import { findLinkedPlace } from './find-linked-place'
import { lockPlace } from './lock-place'
import { notePlace } from './note-place'
import { holdMs } from './offer-place'
import { placeLink } from './place-link'

/** A checkout at the card processor lasts at least half an hour; nobody who begins to pay loses the place meanwhile. */
const checkoutMs = 31 * 60_000

/**
 * Begins to pay for a place by its mailed link. For the deposit the hold grows to 48 hours from the offer, and message 1 says so, once an offer.
 *
 * @throws {Refusal} place_link_unknown, place_state, hold_ran_out, nothing_to_pay
 */
export async function beginToPay(em: EntityManager, app: App, token: string, purpose: 'deposit' | 'balance' | 'renewal'): Promise<PayAnswer> {
  const { id } = await findLinkedPlace(em, app, token)
  if (purpose === 'deposit') await em.fork().transactional(tx => holdForPaying(tx, app, id))
  return beginPayment(em.fork(), app, id, purpose)
}

async function holdForPaying(tx: EntityManager, app: App, id: string): Promise<void> {
  const { place, cohort } = await lockPlace(tx, id)
  const now = app.clock.schoolNow()
  if (place.state === 'waiting-list') throw new Refusal('hold_ran_out')
  if (place.state !== 'offered' || !place.offeredAt || !place.heldUntil) throw new Refusal('place_state')
  if (place.heldUntil <= now) throw new Refusal('hold_ran_out')
  const whole = place.offeredAt.getTime() + holdMs.offer
  // Never longer than this, however often somebody begins.
  const until = new Date(whole - now.getTime() < checkoutMs ? whole + checkoutMs : whole)
  if (until <= place.heldUntil) return
  const wasShort = place.heldUntil.getTime() < whole
  place.heldUntil = until
  notePlace(tx, place, 'visitor', 'place-pay-begun', { until: until.toISOString() })
  if (!wasShort) return
  await writeMail(tx, app, {
    key: `place-held:${place.id}:${place.offeredAt.getTime()}`,
    template: 'place-held',
    to: { id: place.person?.id ?? null, email: place.email },
    letter: placeHeld({
      first: firstName(place.name), cohort: cohort.name, startsOn: cohort.startsOn, until: until.toISOString(), deposit: { minor: cohort.depositMinor, currency: cohort.currency },
      url: placeLink(app, place), rulesUrl: `${app.config.publicUrl}/cohorts/${cohort.code}`,
    }),
  })
}
