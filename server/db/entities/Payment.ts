import { defineEntity, p, type InferEntity } from '@mikro-orm/core'
import { BenchPlace } from './BenchPlace'
import { id, instant } from './column'

export const paymentPurposes = ['deposit', 'balance', 'renewal'] as const
export type PaymentPurpose = (typeof paymentPurposes)[number]

/** One try to pay by card: a checkout at the card processor. What it came to is in the ledger. */
export const Payment = defineEntity({
  name: 'Payment',
  properties: {
    id: id(),
    place: () => p.manyToOne(BenchPlace).ref(),
    purpose: p.enum([...paymentPurposes]),
    amountMinor: p.integer(),
    currency: p.string().length(3),
    state: p.enum(['begun', 'open', 'paid', 'expired'] as const),
    /** The processor's; null until it has answered. */
    sessionId: p.string().length(255).unique().nullable(),
    intentId: p.string().length(255).nullable(),
    url: p.text().nullable(),
    createdAt: instant(),
    expiresAt: instant(),
    paidAt: instant().nullable(),
  },
  checks: [{ name: 'payment_amount', expression: 'amount_minor > 0' }],
  indexes: [
    { properties: ['state', 'createdAt'] },
    { name: 'payment_one_open', expression: `create unique index "payment_one_open" on "payment" ("place_id", "purpose") where "state" in ('begun', 'open')` },
  ],
})
export type Payment = InferEntity<typeof Payment>
