import { expect, it } from 'vitest'
import { compareMoney, printComparison, type LedgerEntry } from '../../../scripts/lib/compare-ledger'
import type { ChargeState, RefundState } from '#server/adapters/payments/payments'

const at = new Date('2026-03-26T19:40:00Z')
const refund = (id: string, amountMinor: number, state: RefundState['state'] = 'succeeded'): RefundState => ({ id, chargeId: 'ch_1', intentId: 'pi_1', amountMinor, currency: 'GBP', at, state, problem: null, reference: null })
const charge = (id: string, amountMinor: number, refunds: RefundState[] = [], paid = true): ChargeState => ({ id, intentId: 'pi_1', amountMinor, currency: 'GBP', at, paid, reference: null, refunds })
const line = (reference: string, amountMinor: number, receipts: string[] = ['S-000001'], currency = 'GBP'): LedgerEntry => ({ kind: amountMinor > 0 ? 'card' : 'card-refund', reference, amountMinor, currency, receipts })
const problems = (charges: ChargeState[], lines: LedgerEntry[]) => compareMoney(charges, lines).map(row => `${row.id} ${row.problem || 'agrees'}`)

it('agrees when each charge and refund has its line, and each charge its one receipt', () => {
  expect(problems([charge('ch_1', 35_000, [refund('re_1', 32_500)]), charge('ch_2', 35_000, [], false)], [line('re_1', -32_500, []), line('ch_1', 35_000)])).toEqual(['ch_1 agrees', 're_1 agrees'])
})

it('does not count a refund that is on its way or failed', () => {
  expect(problems([charge('ch_1', 35_000, [refund('re_1', 100, 'pending'), refund('re_2', 100, 'failed')])], [line('ch_1', 35_000)])).toEqual(['ch_1 agrees'])
})

it('names what is missing, doubled, of another sum or currency, without its receipt, or of nobody', () => {
  expect(problems([charge('ch_1', 35_000)], [])).toEqual(['ch_1 not in the ledger'])
  expect(problems([charge('ch_1', 35_000)], [line('ch_1', 35_000), line('ch_1', 35_000)])).toEqual(['ch_1 2 times in the ledger'])
  expect(problems([charge('ch_1', 35_000)], [line('ch_1', 34_999)])).toEqual(['ch_1 another sum'])
  expect(problems([charge('ch_1', 35_000)], [line('ch_1', 35_000, ['S-000001'], 'EUR')])).toEqual(['ch_1 another sum'])
  expect(problems([charge('ch_1', 35_000)], [line('ch_1', 35_000, [])])).toEqual(['ch_1 0 receipts'])
  expect(problems([charge('ch_1', 35_000)], [line('ch_1', 35_000, ['S-000001', 'S-000002'])])).toEqual(['ch_1 2 receipts'])
  expect(problems([], [line('ch_9', 35_000)])).toEqual(['ch_9 the processor does not know it'])
  expect(problems([charge('ch_1', 35_000, [refund('re_1', 500)])], [line('ch_1', 35_000)])).toEqual(['ch_1 agrees', 're_1 not in the ledger'])
})

it('prints sums of both sides and how many do not agree', () => {
  const said: string[] = []
  expect(printComparison(compareMoney([charge('ch_1', 35_000), charge('ch_2', 35_000)], [line('ch_1', 35_000)]), text => said.push(text))).toBe(1)
  expect(said.find(text => text.startsWith('charges'))).toMatch(/^charges\s+2\s+700\.00\s+350\.00$/)
  expect(said.at(-1)).toBe('1 of 2 do not agree.')
})
