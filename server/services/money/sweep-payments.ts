import { BenchPlace } from '#server/db/entities/BenchPlace'
import { Payment } from '#server/db/entities/Payment'
import { PaymentEvent } from '#server/db/entities/PaymentEvent'
import { SchoolSetting } from '#server/db/entities/SchoolSetting'
import { takesBench } from '#server/services/places/place-states'
import type { App } from '#server/utils/app'
import { applyPayment } from './apply-payment'
import { endCheckout } from './end-checkout'
import { keepPaymentMessage } from './keep-payment-message'

const seenUntil = 'payment-messages-seen'
/** Messages may be listed a little after they happened. */
const overlapMs = 10 * 60_000
/** The processor forgets them after 30 days; a school that was away longer has its open payments still. */
const firstLookMs = 24 * 3_600_000
/** A payment that was begun this moment is in somebody's hands. */
const youngMs = 60_000

/**
 * Finds what no message told: looks how every open payment stands, shuts pages of places that are not held any more, and keeps the
 * processor's own list of what happened since the last look. One payment that cannot be looked at does not hold up the others.
 *
 * @throws {Error} when some could not be looked at, so that the work is tried again
 */
export async function sweepPayments(app: App): Promise<void> {
  const faults: unknown[] = []
  const each = async (work: () => Promise<unknown>) => {
    try {
      await work()
    }
    catch (fault) {
      faults.push(fault)
    }
  }
  const now = app.clock.now()
  const open = await app.orm.em.fork().find(Payment, { $or: [{ state: 'open' }, { state: 'begun', createdAt: { $lt: new Date(now.getTime() - youngMs) } }] }, { orderBy: { createdAt: 'asc' } })
  for (const { id } of open) await each(() => lookAt(app, id))
  await each(() => readMessages(app, now))
  if (faults.length > 0) throw new AggregateError(faults, `payments: ${faults.length} of ${open.length + 1} looks did not succeed: ${faults[0] instanceof Error ? faults[0].message : String(faults[0])}`)
}

async function lookAt(app: App, paymentId: string): Promise<void> {
  const em = app.orm.em.fork()
  const payment = await em.findOneOrFail(Payment, paymentId)
  const place = await em.findOneOrFail(BenchPlace, { id: payment.place.id })
  const wanted = payment.purpose === 'renewal' || place.state === 'finished'
    ? place.state === 'finished'
    : payment.purpose === 'balance' ? place.state !== 'offered' && takesBench(place.state) : place.state === 'offered' && !!place.heldUntil && place.heldUntil > app.clock.schoolNow()
  await (wanted ? applyPayment(app, paymentId) : endCheckout(app, paymentId))
}

async function readMessages(app: App, now: Date): Promise<void> {
  const em = app.orm.em.fork()
  const setting = await em.findOne(SchoolSetting, { name: seenUntil })
  const since = typeof setting?.value === 'string' ? Date.parse(setting.value) - overlapMs : now.getTime() - firstLookMs
  const messages = await app.payments.listEvents(new Date(since))
  // Nearly all of them came by themselves.
  const known = new Set((await em.find(PaymentEvent, { id: { $in: messages.map(one => one.id) } })).map(one => one.id))
  for (const message of messages) if (!known.has(message.id)) await keepPaymentMessage(app.orm.em.fork(), app, message)
  // Only after all of them are kept.
  await em.upsert(SchoolSetting, { name: seenUntil, value: now.toISOString() })
}
