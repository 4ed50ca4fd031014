import { setTimeout as sleep } from 'node:timers/promises'
import Stripe from 'stripe'
import { z } from 'zod'
import { AdapterRefusal } from '../adapter-refusal'
import type { ChargeState, CheckoutState, PaymentMessage, Payments, RefundState } from './payments'

export interface PaySettings {
  key: string
  webhookSecret: string
  /** Where the processor answers; its own address when left out. */
  endpoint?: string | null
}

/** The SDK tries again after a lost line or a 5xx, never after "too many requests": that is ours. */
const busyTries = 5
const firstWaitMs = 200

/** Card payments by Stripe, or by whatever speaks its API at the endpoint given. */
export function stripePayments(settings: PaySettings, wait: (ms: number) => Promise<unknown> = sleep): Payments {
  const endpoint = settings.endpoint ? new URL(settings.endpoint) : null
  const stripe = new Stripe(settings.key, {
    apiVersion: '2026-10-28.endive',
    telemetry: false,
    maxNetworkRetries: 2,
    timeout: 10_000,
    ...(endpoint
      ? { host: endpoint.hostname, port: endpoint.port || (endpoint.protocol === 'https:' ? 443 : 80), protocol: endpoint.protocol === 'http:' ? 'http' as const : 'https' as const }
      : {}),
  })

  async function ask<T>(work: () => Promise<T>): Promise<T> {
    for (let tries = 1; ; tries += 1) {
      try {
        return await work()
      }
      catch (thrown) {
        const busy = thrown instanceof Stripe.errors.StripeRateLimitError
        if (busy && tries < busyTries) {
          await wait(firstWaitMs * 2 ** (tries - 1))
          continue
        }
        if (busy || thrown instanceof Stripe.errors.StripeConnectionError || thrown instanceof Stripe.errors.StripeAPIError) {
          throw new AdapterRefusal('payments_unreachable', 'The card processor does not answer at the moment. Nothing was taken; try again in a minute.')
        }
        throw thrown
      }
    }
  }

  /** What the processor will not do, however often it is asked; anything else goes on. */
  async function orRefused<T>(work: () => Promise<T>): Promise<T | { state: 'refused', problem: string }> {
    try {
      return await ask(work)
    }
    catch (thrown) {
      const { StripeInvalidRequestError, StripeIdempotencyError, StripeCardError } = Stripe.errors
      if (thrown instanceof StripeInvalidRequestError || thrown instanceof StripeIdempotencyError || thrown instanceof StripeCardError) {
        return { state: 'refused', problem: thrown.message }
      }
      throw thrown
    }
  }

  /** Every page of a list. The SDK's own paging would not wait for a busy processor. */
  async function all<T extends { id: string }>(page: (after: string | undefined) => Promise<{ data: T[], has_more: boolean }>): Promise<T[]> {
    const items: T[] = []
    let more = true
    while (more) {
      const got = await ask(() => page(items.at(-1)?.id))
      items.push(...got.data)
      more = got.has_more && got.data.length > 0
    }
    return items
  }

  /** Lists come newest first. */
  const oldestFirst = <T>(items: T[]): T[] => items.reverse()
  const since = (moment: Date) => ({ gte: Math.floor(moment.getTime() / 1000) })

  return {
    startCheckout: order => orRefused(async () => {
      const session = await stripe.checkout.sessions.create({
        mode: 'payment',
        client_reference_id: order.reference,
        line_items: [{ quantity: 1, price_data: { currency: order.currency.toLowerCase(), unit_amount: order.amountMinor, product_data: { name: order.what } } }],
        ...(order.email ? { customer_email: order.email } : {}),
        success_url: order.successUrl,
        cancel_url: order.cancelUrl,
        expires_at: Math.floor(order.expiresAt.getTime() / 1000),
        metadata: { payment: order.reference },
        // Charges and their messages carry it as well.
        payment_intent_data: { metadata: { payment: order.reference } },
      }, { idempotencyKey: order.key })
      if (!session.url) throw new Error(`checkout session ${session.id} has no page`)
      return { state: 'open' as const, sessionId: session.id, url: session.url, expiresAt: toDate(session.expires_at) }
    }),

    async readCheckout(sessionId) {
      const session = await ask(() => stripe.checkout.sessions.retrieve(sessionId))
      const intentId = idOf(session.payment_intent)
      const charges = intentId ? await all(after => stripe.charges.list({ payment_intent: intentId, limit: 100, starting_after: after })) : []
      const refunds = intentId && charges.some(one => one.paid) ? await all(after => stripe.refunds.list({ payment_intent: intentId, limit: 100, starting_after: after })) : []
      return {
        sessionId: session.id,
        reference: session.client_reference_id,
        status: toStatus(session.status),
        paid: session.payment_status === 'paid',
        url: session.url,
        expiresAt: toDate(session.expires_at),
        intentId,
        charges: joinRefunds(oldestFirst(charges), oldestFirst(refunds)),
      } satisfies CheckoutState
    },

    async findCheckout(reference, from) {
      const sessions = await all(after => stripe.checkout.sessions.list({ created: since(from), limit: 100, starting_after: after }))
      return sessions.find(session => session.client_reference_id === reference)?.id ?? null
    },

    async expireCheckout(sessionId) {
      // Refused when it is complete or expired already: whoever asked reads how it stands anyway.
      await orRefused(() => stripe.checkout.sessions.expire(sessionId))
    },

    refund: ({ chargeId, intentId, amountMinor, key, reference }) => orRefused(async () => toRefund(await stripe.refunds.create({
      ...(chargeId ? { charge: chargeId } : { payment_intent: intentId }),
      amount: amountMinor,
      metadata: { refund: reference },
    }, { idempotencyKey: key }))),

    readWebhook(raw, signature, now) {
      try {
        return toMessage(stripe.webhooks.constructEvent(Buffer.from(raw), signature ?? '', settings.webhookSecret, undefined, undefined, now.getTime()))
      }
      catch (thrown) {
        if (thrown instanceof Stripe.errors.StripeSignatureVerificationError) {
          throw new AdapterRefusal('signature_invalid', 'This message is not signed by the card processor, was changed on its way, or is too old.')
        }
        if (thrown instanceof SyntaxError || thrown instanceof z.ZodError) throw new AdapterRefusal('body_not_json', 'This message is signed and is no event of the card processor.')
        throw thrown
      }
    },

    async listEvents(from) {
      return oldestFirst(await all(after => stripe.events.list({ created: since(from), limit: 100, starting_after: after }))).map(toMessage)
    },

    async listCharges(from) {
      const charges = await all(after => stripe.charges.list({ created: since(from), limit: 100, starting_after: after }))
      const refunds = await all(after => stripe.refunds.list({ created: since(from), limit: 100, starting_after: after }))
      return joinRefunds(oldestFirst(charges), oldestFirst(refunds))
    },
  }
}

const toDate = (seconds: number) => new Date(seconds * 1000)
const idOf = (value: string | { id: string } | null): string | null => typeof value === 'string' ? value : value?.id ?? null

/** Typed as any text, since later versions of the API may know more. */
const toStatus = (status: string | null): CheckoutState['status'] => status === 'complete' || status === 'expired' ? status : 'open'

function toRefund(refund: Stripe.Refund): RefundState {
  const failed = refund.status === 'failed' || refund.status === 'canceled'
  return {
    id: refund.id,
    chargeId: idOf(refund.charge),
    intentId: idOf(refund.payment_intent),
    amountMinor: refund.amount,
    currency: refund.currency.toUpperCase(),
    at: toDate(refund.created),
    state: failed ? 'failed' : refund.status === 'succeeded' ? 'succeeded' : 'pending',
    problem: failed ? refund.failure_reason ?? refund.status : null,
    reference: refund.metadata?.refund ?? null,
  }
}

function joinRefunds(charges: Stripe.Charge[], refunds: Stripe.Refund[]): ChargeState[] {
  const known = refunds.map(toRefund)
  return charges.map(charge => ({
    id: charge.id,
    intentId: idOf(charge.payment_intent),
    amountMinor: charge.amount,
    currency: charge.currency.toUpperCase(),
    at: toDate(charge.created),
    paid: charge.paid && charge.status === 'succeeded',
    reference: charge.metadata.payment ?? null,
    refunds: known.filter(refund => refund.chargeId === charge.id),
  }))
}

/** What we read of a message. Those of kinds we never heard of have other members: what is not there is null. */
const eventShape = z.object({
  id: z.string().min(1).max(255),
  type: z.string().min(1),
  created: z.number().int(),
  data: z.object({
    object: z.object({
      id: z.string().max(255).nullish(),
      object: z.string().nullish(),
      client_reference_id: z.string().nullish(),
      payment_intent: z.union([z.string(), z.object({ id: z.string() })]).nullish(),
      metadata: z.object({ payment: z.string().optional() }).nullish(),
    }),
  }),
})

/** @throws {z.ZodError} when it is no event */
function toMessage(event: unknown): PaymentMessage {
  const { id, type, created, data: { object: about } } = eventShape.parse(event)
  return {
    id,
    type,
    at: toDate(created),
    about: about.id ?? null,
    reference: about.client_reference_id ?? about.metadata?.payment ?? null,
    intentId: about.object === 'payment_intent' ? about.id ?? null : idOf(about.payment_intent ?? null),
  }
}
