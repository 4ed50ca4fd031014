import { randomBytes } from 'node:crypto'
import { PayError } from './pay-error'
import type { Change, Charge, Intent, PayEvent, PayStore, Refund, Session } from './pay-store'

export const apiVersion = '2026-10-28.endive'

/** What the hosted page's buttons stand for. */
export const declines = {
  declined: { code: 'card_declined', decline_code: 'generic_decline', message: 'Your card was declined.' },
  insufficient: { code: 'card_declined', decline_code: 'insufficient_funds', message: 'Your card has insufficient funds.' },
} as const

/** What happens to money here: each is one commit, with the events that tell of it. */
export class Processor {
  constructor(private readonly store: PayStore, private readonly now: () => Date, private readonly tell: (events: PayEvent[]) => void) {}

  id(prefix: string): string {
    return `${prefix}_${prefix === 'cs' ? 'test_' : ''}${randomBytes(12).toString('hex')}`
  }

  seconds(): number {
    return Math.floor(this.now().getTime() / 1000)
  }

  /** Keeps the changes with their events, then sends the events on their way. */
  commit(changes: Change[], happened: [type: string, about: Session | Intent | Charge | Refund][]): void {
    const events = happened.map(([type, object]): PayEvent => ({
      id: this.id('evt'), object: 'event', api_version: apiVersion, created: this.seconds(), data: { object: structuredClone(object) }, livemode: false, pending_webhooks: 1, request: { id: null, idempotency_key: null }, type,
    }))
    this.store.commit([...changes, ...events.flatMap((event): Change[] => [['events', event], ['deliveries', { id: event.id, state: 'waiting' }]])])
    this.tell(events)
  }

  /** A session as it stands now: one whose time has run out is expired by looking at it. */
  session(id: string): Session | undefined {
    const session = this.store.get('sessions', id)
    if (session?.status === 'open' && session.expires_at <= this.seconds()) {
      this.expire(session)
      return this.store.get('sessions', id)
    }
    return session
  }

  /** Expires every session whose time has run out. */
  tick(): void {
    for (const { id, status } of this.store.all('sessions')) if (status === 'open') this.session(id)
  }

  expire(session: Session): void {
    const expired: Session = { ...session, status: 'expired', url: null }
    this.commit([['sessions', expired]], [['checkout.session.expired', expired]])
  }

  /** The card is charged, once: a session that is complete stays as it is. */
  pay(session: Session): void {
    if (session.status !== 'open') return
    const { intent, charge } = this.attempt(session)
    const paid: Charge = { ...charge, amount_captured: charge.amount, captured: true, paid: true, status: 'succeeded' }
    const through: Intent = { ...intent, amount_received: intent.amount, latest_charge: paid.id, last_payment_error: null, status: 'succeeded' }
    const complete: Session = { ...session, payment_intent: intent.id, payment_status: 'paid', status: 'complete', url: null }
    this.commit([['charges', paid], ['intents', through], ['sessions', complete]], [['charge.succeeded', paid], ['payment_intent.succeeded', through], ['checkout.session.completed', complete]])
  }

  /** The card is refused; the session stays open for another try. */
  decline(session: Session, how: keyof typeof declines): void {
    if (session.status !== 'open') return
    const { code, decline_code, message } = declines[how]
    const { intent, charge } = this.attempt(session)
    const failed: Charge = { ...charge, failure_code: code, failure_message: message }
    const waiting: Intent = { ...intent, latest_charge: failed.id, last_payment_error: { type: 'card_error', code, decline_code, message } }
    this.commit([['charges', failed], ['intents', waiting], ['sessions', { ...session, payment_intent: intent.id }]], [['charge.failed', failed], ['payment_intent.payment_failed', waiting]])
  }

  /** The intent is made with the first try. */
  private attempt(session: Session): { intent: Intent, charge: Charge } {
    const metadata = this.store.get('insides', session.id)?.intentMetadata ?? {}
    const { amount_total: amount, currency } = session
    const intent: Intent = (session.payment_intent ? this.store.get('intents', session.payment_intent) : undefined) ?? {
      id: this.id('pi'), object: 'payment_intent', amount, amount_received: 0, created: this.seconds(), currency, last_payment_error: null, latest_charge: null, livemode: false, metadata, status: 'requires_payment_method',
    }
    const charge: Charge = {
      id: this.id('ch'), object: 'charge', amount, amount_captured: 0, amount_refunded: 0, captured: false, created: this.seconds(), currency, failure_code: null, failure_message: null,
      livemode: false, metadata, paid: false, payment_intent: intent.id, refunded: false, status: 'failed',
    }
    return { intent, charge }
  }

  /** @throws {PayError} when more is asked than is left of the charge */
  refund(charge: Charge, amount: number, more: { metadata: Record<string, string>, reason: string | null }): { refund: Refund, changes: Change[], happened: [string, Refund | Charge][] } {
    if (!charge.paid) throw new PayError(400, 'invalid_request_error', `Charge ${charge.id} did not go through, so there is nothing to refund.`, { param: 'charge' })
    const left = charge.amount - charge.amount_refunded
    if (left === 0) throw new PayError(400, 'invalid_request_error', `Charge ${charge.id} has already been refunded.`, { code: 'charge_already_refunded' })
    if (amount > left) throw new PayError(400, 'invalid_request_error', `Refund amount (${amount}) is greater than unrefunded amount on charge (${left})`, { param: 'amount' })
    const refund: Refund = { id: this.id('re'), object: 'refund', amount, charge: charge.id, created: this.seconds(), currency: charge.currency, metadata: more.metadata, payment_intent: charge.payment_intent, reason: more.reason, status: 'succeeded' }
    const refunded = charge.amount_refunded + amount
    const less: Charge = { ...charge, amount_refunded: refunded, refunded: refunded === charge.amount }
    return { refund, changes: [['refunds', refund], ['charges', less]], happened: [['refund.created', refund], ['charge.refunded', less]] }
  }
}
