import type { MikroORM } from '@mikro-orm/postgresql'
import type { ChargeState, Payments } from '../../server/adapters/payments/payments'
import { LedgerLine } from '../../server/db/entities/LedgerLine'
import { Payment } from '../../server/db/entities/Payment'
import { Receipt } from '../../server/db/entities/Receipt'
import { receiptNumber } from '../../shared/contract/receipt-number'

export interface LedgerEntry {
  kind: 'card' | 'card-refund'
  /** The processor's charge or refund. */
  reference: string
  amountMinor: number
  currency: string
  receipts: string[]
}
export interface ComparedMoney {
  what: 'charge' | 'refund'
  id: string
  /** Minor units; null where one side has nothing. A refund is negative on both. */
  processorMinor: number | null
  ledgerMinor: number | null
  receipts: string[]
  /** Why the two do not agree; empty when they do. */
  problem: string
}

/** Sets what the card processor took and gave back beside what the school wrote down, charge by charge; what only one side has is a row as well. */
export function compareMoney(charges: readonly ChargeState[], entries: readonly LedgerEntry[]): ComparedMoney[] {
  const left = new Map<string, LedgerEntry[]>()
  for (const entry of entries) left.set(`${entry.kind}:${entry.reference}`, [...left.get(`${entry.kind}:${entry.reference}`) ?? [], entry])
  const take = (what: ComparedMoney['what'], id: string, minor: number, currency: string): ComparedMoney => {
    const key = `${what === 'charge' ? 'card' : 'card-refund'}:${id}`
    const found = left.get(key) ?? []
    left.delete(key)
    const receipts = found.flatMap(one => one.receipts)
    const [line] = found
    const wanted = what === 'charge' ? 1 : 0
    const problem = !line
      ? 'not in the ledger'
      : found.length > 1
        ? `${found.length} times in the ledger`
        : line.amountMinor !== minor || line.currency !== currency ? 'another sum' : receipts.length !== wanted ? `${receipts.length} receipts` : ''
    return { what, id, processorMinor: minor, ledgerMinor: line ? found.reduce((sum, one) => sum + one.amountMinor, 0) : null, receipts, problem }
  }
  const rows = charges.filter(charge => charge.paid).flatMap(charge => [
    take('charge', charge.id, charge.amountMinor, charge.currency),
    ...charge.refunds.filter(refund => refund.state === 'succeeded').map(refund => take('refund', refund.id, -refund.amountMinor, refund.currency)),
  ])
  for (const [, found] of left) {
    for (const line of found) rows.push({ what: line.kind === 'card' ? 'charge' : 'refund', id: line.reference, processorMinor: null, ledgerMinor: line.amountMinor, receipts: line.receipts, problem: 'the processor does not know it' })
  }
  return rows
}

/** Reads both sides, the processor's from a day before the school's first card payment. */
export async function compareLedger(orm: MikroORM, payments: Payments): Promise<ComparedMoney[]> {
  const em = orm.em.fork()
  const [first] = await em.find(Payment, {}, { orderBy: { createdAt: 'asc' }, limit: 1 })
  const charges = first ? await payments.listCharges(new Date(first.createdAt.getTime() - 24 * 3_600_000)) : []
  const lines = await em.find(LedgerLine, { kind: { $in: ['card', 'card-refund'] } }, { orderBy: { at: 'asc', id: 'asc' } })
  const receipts = new Map<string, string[]>()
  for (const receipt of await em.find(Receipt, { line: { $in: lines.map(line => line.id) } })) receipts.set(receipt.line.id, [...receipts.get(receipt.line.id) ?? [], receiptNumber(receipt.number)])
  return compareMoney(charges, lines.map(line => ({ kind: line.kind === 'card' ? 'card' : 'card-refund', reference: line.reference, amountMinor: line.amountMinor, currency: line.currency, receipts: receipts.get(line.id) ?? [] })))
}

/** The comparison as a table, with its sums and how many rows do not agree. */
export function printComparison(rows: readonly ComparedMoney[], say: (line: string) => void): number {
  const money = (minor: number | null) => (minor === null ? '-' : (minor / 100).toFixed(2)).padStart(12)
  const sum = (of: 'processorMinor' | 'ledgerMinor', what: ComparedMoney['what']) => rows.filter(row => row.what === what).reduce((total, row) => total + (row[of] ?? 0), 0)
  say(`${'what'.padEnd(8)}${'id'.padEnd(32)}${'processor'.padStart(12)}${'ledger'.padStart(12)}  ${'receipt'.padEnd(10)}agrees`)
  for (const row of rows) say(`${row.what.padEnd(8)}${row.id.padEnd(32)}${money(row.processorMinor)}${money(row.ledgerMinor)}  ${(row.receipts.join(' ') || '-').padEnd(10)}${row.problem === '' ? 'yes' : `NO: ${row.problem}`}`)
  const bad = rows.filter(row => row.problem !== '').length
  for (const what of ['charge', 'refund'] as const) say(`${`${what}s`.padEnd(8)}${String(rows.filter(row => row.what === what).length).padEnd(32)}${money(sum('processorMinor', what))}${money(sum('ledgerMinor', what))}`)
  say(`${bad} of ${rows.length} do not agree.`)
  return bad
}
