import { defineEntity, p, type InferEntity } from '@mikro-orm/core'
import { BenchPlace } from './BenchPlace'
import { id, instant } from './column'
import { Payment, paymentPurposes } from './Payment'
import { Refund } from './Refund'
import { User } from './User'

export const ledgerKinds = ['card', 'card-refund', 'bank', 'bank-refund', 'moved-in', 'moved-out'] as const
export type LedgerKind = (typeof ledgerKinds)[number]

/**
 * Money that came or went; never changed, never removed. A balance is a sum of these.
 * A place that is moved takes its money along by a pair of lines that sum to nothing.
 */
export const LedgerLine = defineEntity({
  name: 'LedgerLine',
  properties: {
    id: id(),
    place: () => p.manyToOne(BenchPlace).ref(),
    kind: p.enum([...ledgerKinds]),
    purpose: p.enum([...paymentPurposes]),
    /** In positive, out negative. */
    amountMinor: p.integer(),
    currency: p.string().length(3),
    payment: () => p.manyToOne(Payment).ref().nullable(),
    refund: () => p.manyToOne(Refund).ref().nullable(),
    /** The processor's charge or refund, or the bank's reference: says the same money once. */
    reference: p.string().length(255),
    /** Who wrote it down; null when the processor told. */
    by: () => p.manyToOne(User).ref().nullable(),
    /** When the money moved, by the processor or the bank. */
    at: instant(),
    writtenAt: instant(),
  },
  checks: [{ name: 'ledger_line_sign', expression: `(amount_minor <> 0) AND ((amount_minor > 0) = (kind = ANY (ARRAY['card'::text, 'bank'::text, 'moved-in'::text])))` }],
  uniques: [{ properties: ['kind', 'reference'] }],
  indexes: [{ properties: ['place'] }, { properties: ['at', 'id'] }],
})
export type LedgerLine = InferEntity<typeof LedgerLine>
