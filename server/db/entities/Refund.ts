import { defineEntity, p, type InferEntity } from '@mikro-orm/core'
import { BenchPlace } from './BenchPlace'
import { id, instant } from './column'
import { Payment, paymentPurposes } from './Payment'
import { User } from './User'

/**
 * Money the school decided to give back, by which rule: of one card payment, to its card; or, where a bank transfer is given back,
 * with no payment, to be sent by bank and written down. The row is the decision; the ledger says when it went.
 */
export const Refund = defineEntity({
  name: 'Refund',
  properties: {
    id: id(),
    place: () => p.manyToOne(BenchPlace).ref(),
    /** The card payment it goes back to; null when it goes by bank. */
    payment: () => p.manyToOne(Payment).ref().nullable(),
    /** Which of the place's sums it is taken from. */
    purpose: p.enum([...paymentPurposes]),
    amountMinor: p.integer(),
    currency: p.string().length(3),
    /** Code of the rule it follows, or `by-hand`. */
    rule: p.string().length(60),
    /** The rule and the sum in words, as shown before it was pressed. */
    wording: p.text(),
    sum: p.text(),
    /** Null when the school's own rule gave it without a person: a payment for a place that was gone. */
    decidedBy: () => p.manyToOne(User).ref().nullable(),
    decidedAt: instant(),
    state: p.enum(['decided', 'sent', 'refused'] as const),
    /** Times it was sent again after a refusal: part of the key the processor knows the try by. */
    tries: p.integer().default(0),
    providerId: p.string().length(255).unique().nullable(),
    problem: p.text().nullable(),
  },
  checks: [{ name: 'refund_amount', expression: 'amount_minor > 0' }],
  indexes: [{ properties: ['place'] }, { properties: ['state', 'decidedAt'] }],
})
export type Refund = InferEntity<typeof Refund>
