import { defineEntity, p, type InferEntity } from '@mikro-orm/core'
import { BenchPlace } from './BenchPlace'
import { id, instant } from './column'
import { Payment } from './Payment'
import { User } from './User'

/** Money the school decided to give back of one card payment, by which rule. The row is the decision; the ledger says when it went. */
export const Refund = defineEntity({
  name: 'Refund',
  properties: {
    id: id(),
    place: () => p.manyToOne(BenchPlace).ref(),
    payment: () => p.manyToOne(Payment).ref(),
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
    providerId: p.string().length(255).unique().nullable(),
    problem: p.text().nullable(),
  },
  indexes: [{ properties: ['place'] }, { properties: ['state', 'decidedAt'] }],
})
export type Refund = InferEntity<typeof Refund>
