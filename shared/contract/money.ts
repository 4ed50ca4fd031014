import { z } from 'zod'
import { cleanText } from './text'

/** An amount in minor units: 35000 GBP is 350.00 pounds. Never a fraction. */
export interface Money { minor: number, currency: string }

/** "£350.00", "-£25.00". */
export function moneyText({ minor, currency }: Money): string {
  return new Intl.NumberFormat('en-GB', { style: 'currency', currency }).format(minor / 100)
}

export interface RefundQuote {
  /** Code of the rule, its words, and the sum written out: "350.00 paid - 25.00 kept = 325.00 back". */
  rule: string, wording: string, sum: string
  deposit: { paid: Money, back: Money }, balance: { paid: Money, back: Money }
  back: Money
  mayMove: boolean
  /** How it is split over what was paid; empty when nothing goes back. */
  parts: { paymentId: string, amount: Money }[]
}

export interface LedgerRow { id: string, at: string, place: { id: string, name: string, cohort: string }, kind: string, purpose: string, amount: Money, reference: string, receipt: string | null, by: string | null }
export interface MoneyBookView { items: LedgerRow[], next: string | null, sums: { in: Money, out: Money, balance: Money, due: Money } }
export const ledgerQuery = z.object({ search: cleanText(100).optional(), cohort: z.string().max(20).optional(), kind: z.string().max(20).optional(), from: z.string().regex(/^\d{4}-\d{2}-\d{2}$/).optional(), until: z.string().regex(/^\d{4}-\d{2}-\d{2}$/).optional(), sort: z.enum(['newest', 'oldest', 'amount']).default('newest'), after: z.string().max(400).optional(), limit: z.coerce.number().int().min(1).max(100).default(25) })
/** Sums that are due and not paid, soonest first. */
export interface DueRow { place: { id: string, name: string, email: string, cohort: string }, amount: Money, dueOn: string, daysLate: number, how: 'card or bank' | 'purchase order', order: string | null }
/** Refunds that have not gone through, and payments begun and not finished. */
export interface OpenMoneyView { due: DueRow[], refunds: { id: string, place: { id: string, name: string }, amount: Money, state: string, problem: string | null, decidedAt: string }[] }
