import { closeSync, existsSync, fsyncSync, ftruncateSync, mkdirSync, openSync, readFileSync, writeSync } from 'node:fs'
import { join } from 'node:path'
import { syncFolder } from '../write-durably'

export type Session = {
  id: string, object: 'checkout.session', amount_subtotal: number, amount_total: number, cancel_url: string | null, client_reference_id: string | null
  created: number, currency: string, customer: null, customer_email: string | null, expires_at: number, livemode: false, metadata: Record<string, string>
  mode: 'payment', payment_intent: string | null, payment_method_types: ['card'], payment_status: 'unpaid' | 'paid', status: 'open' | 'complete' | 'expired'
  success_url: string, url: string | null
}
export type LineItem = { id: string, object: 'item', amount_subtotal: number, amount_total: number, currency: string, description: string, quantity: number }
export type Intent = {
  id: string, object: 'payment_intent', amount: number, amount_received: number, created: number, currency: string, last_payment_error: { code: string, message: string, type: 'card_error', decline_code: string } | null
  latest_charge: string | null, livemode: false, metadata: Record<string, string>, status: 'requires_payment_method' | 'succeeded' | 'canceled'
}
export type Charge = {
  id: string, object: 'charge', amount: number, amount_captured: number, amount_refunded: number, captured: boolean, created: number, currency: string
  failure_code: string | null, failure_message: string | null, livemode: false, metadata: Record<string, string>, paid: boolean, payment_intent: string
  refunded: boolean, status: 'succeeded' | 'failed'
}
export type Refund = {
  id: string, object: 'refund', amount: number, charge: string, created: number, currency: string, failure_reason?: string, metadata: Record<string, string>
  payment_intent: string, reason: string | null, status: 'succeeded' | 'failed'
}
export type PayEvent = { id: string, object: 'event', api_version: string, created: number, data: { object: Session | Intent | Charge | Refund }, livemode: false, pending_webhooks: number, request: { id: string | null, idempotency_key: string | null }, type: string }

export type Held = {
  sessions: Session
  /** What a session has that the API does not show. */
  insides: { id: string, items: LineItem[], intentMetadata: Record<string, string> }
  intents: Intent
  charges: Charge
  refunds: Refund
  events: PayEvent
  /** Whether an event reached whom it is for. */
  deliveries: { id: string, state: 'waiting' | 'done' | 'lost' | 'given-up' }
  /** First answer given to an idempotency key. */
  keys: { id: string, asked: string, status: number, body: unknown }
}
export type Change = { [Kind in keyof Held]: [Kind, Held[Kind]] }[keyof Held]

/**
 * Everything the stand-in knows, in memory and in one file that only grows. What belongs together is one line, so that after a
 * kill at any moment it is there whole or not at all.
 */
export class PayStore {
  private readonly held: { [Kind in keyof Held]: Map<string, Held[Kind]> } = {
    sessions: new Map(), insides: new Map(), intents: new Map(), charges: new Map(), refunds: new Map(), events: new Map(), deliveries: new Map(), keys: new Map(),
  }

  private readonly file: number

  constructor(dir: string) {
    mkdirSync(dir, { recursive: true })
    const path = join(dir, 'journal.jsonl')
    const text = existsSync(path) ? readFileSync(path, 'utf8') : ''
    // Behind the last line break is what a kill cut short.
    const whole = text.slice(0, text.lastIndexOf('\n') + 1)
    for (const line of whole.split('\n')) if (line !== '') this.take(JSON.parse(line) as Change[])
    this.file = openSync(path, 'a+')
    if (whole.length < text.length) ftruncateSync(this.file, Buffer.byteLength(whole))
    syncFolder(dir)
  }

  /** Keeps all of it or nothing. */
  commit(changes: readonly Change[]): void {
    writeSync(this.file, `${JSON.stringify(changes)}\n`)
    fsyncSync(this.file)
    // Read back, so that what is held shares nothing with what the caller goes on changing.
    this.take(JSON.parse(JSON.stringify(changes)) as Change[])
  }

  private take(changes: readonly Change[]): void {
    for (const [kind, value] of changes) (this.held[kind] as Map<string, { id: string }>).set(value.id, value)
  }

  get<Kind extends keyof Held>(kind: Kind, id: string): Held[Kind] | undefined {
    return structuredClone((this.held[kind] as Map<string, Held[Kind]>).get(id))
  }

  /** Oldest first. */
  all<Kind extends keyof Held>(kind: Kind): Held[Kind][] {
    return [...(this.held[kind] as Map<string, Held[Kind]>).values()].map(value => structuredClone(value))
  }

  close(): void {
    closeSync(this.file)
  }
}
