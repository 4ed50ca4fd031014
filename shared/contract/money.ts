import { z } from 'zod'
import { isDay } from '../domain/money/calendar-days'
import { cleanText, someText } from './text'

/** An amount in minor units: 35000 GBP is 350.00 pounds. Never a fraction. */
export interface Money { minor: number, currency: string }

/** A further year of lessons for somebody who finished, pence (handbook 5.4). */
export const renewalMinor = 4000

/** "£350.00", "-£25.00". */
export function moneyText({ minor, currency }: Money): string {
  return new Intl.NumberFormat('en-GB', { style: 'currency', currency }).format(minor / 100)
}

export type MoneyPurpose = 'deposit' | 'balance' | 'renewal'

export interface RefundQuote {
  /** Code of the rule, its words, and the sum written out: "350.00 paid - 25.00 kept = 325.00 back". */
  rule: string, wording: string, sum: string
  deposit: { paid: Money, back: Money }, balance: { paid: Money, back: Money }
  back: Money
  mayMove: boolean
  /** How it is split over what was paid: to the card of a payment, or by bank where `paymentId` is null. Empty when nothing goes back. */
  parts: { paymentId: string | null, purpose: MoneyPurpose, amount: Money }[]
}

/** A refund that was decided. `sent`: the processor or the bank has it. `refused`: it did not go, `problem` says why. */
export interface RefundView {
  id: string, place: { id: string, name: string, cohort: string }, purpose: MoneyPurpose, by: 'card' | 'bank', amount: Money
  rule: string, wording: string, sum: string, state: 'decided' | 'sent' | 'refused', problem: string | null, decidedAt: string
}
/** What a refund by hand came to, and what of the place's money is left. */
export interface HandRefundAnswer { refunds: RefundView[], left: Money }
/** That a refund went by bank: one that goes by bank, or one the card processor refused. */
export const bankRefundInput = z.object({ refundId: z.string().uuid(), reference: someText(120), on: z.string().refine(isDay, 'is not a date') }).strict()

export interface LedgerRow { id: string, at: string, place: { id: string, name: string, cohort: string }, kind: string, purpose: string, amount: Money, reference: string, receipt: string | null, by: string | null }
/** `moved` is money taken along from one place to another; over the whole book it comes to nothing. */
export interface MoneySums { in: Money, out: Money, moved: Money, balance: Money, due: Money }
export interface MoneyBookView { items: LedgerRow[], next: string | null, sums: MoneySums }
export const ledgerKinds = ['card', 'card-refund', 'bank', 'bank-refund', 'moved-in', 'moved-out'] as const
const day = z.string().refine(isDay, 'is not a date')
export const ledgerFilter = z.object({ search: cleanText(100).optional(), cohort: z.string().max(20).optional(), kind: z.enum(ledgerKinds).optional(), from: day.optional(), until: day.optional(), sort: z.enum(['newest', 'oldest', 'amount']).default('newest') })
export const ledgerQuery = ledgerFilter.extend({ after: z.string().max(400).optional(), limit: z.coerce.number().int().min(1).max(100).default(25) })
/** "S-000123": number of a receipt as it is printed. */
export const receiptParams = z.object({ number: z.string().regex(/^S-\d{6,9}$/) })
/** Sums that are due and not paid, soonest first. */
export interface DueRow { id: string, place: { id: string, name: string, email: string, cohort: string }, amount: Money, dueOn: string, daysLate: number, how: 'card or bank' | 'purchase order', order: string | null }
/** What is owed to the school, and what it decided to give back that has not gone. */
export interface OpenMoneyView { due: DueRow[], refunds: RefundView[] }

/** POST /api/payments/returned: said by the page one comes back to from paying, before it looks again. */
export const returnedInput = z.object({ token: z.string().min(20).max(200) }).strict()
/** `underWay`: a payment is still open, so the page asks again in a moment. */
export interface ReturnedAnswer { underWay: boolean }
