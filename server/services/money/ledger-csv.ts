import type { EntityManager } from '@mikro-orm/postgresql'
import Papa from 'papaparse'
import type { z } from 'zod'
import type { ledgerFilter, LedgerRow } from '#shared/contract/money'
import { schoolDay } from '#shared/contract/school-day'
import { plainAmount } from '#shared/domain/money/plain-amount'
import { readLedger } from './list-ledger'

const pageRows = 5000
const columns = ['Date', 'Name', 'E-mail', 'Cohort', 'Kind', 'For', 'In', 'Out', 'Currency', 'Reference', 'Receipt', 'Written down by']

/**
 * The ledger as a spreadsheet reads it. In and out stand in columns of their own, so no amount needs a sign; a cell that a spreadsheet
 * would take for a formula is given as text.
 */
export async function ledgerCsv(em: EntityManager, filter: z.output<typeof ledgerFilter>): Promise<string> {
  const rows: string[][] = []
  let after: string | undefined
  do {
    const { items, next } = await readLedger(em, { ...filter, limit: pageRows, after })
    rows.push(...items.map(cells))
    after = next ?? undefined
  } while (after)
  // The mark tells a spreadsheet that the letters are UTF-8.
  return `\uFEFF${Papa.unparse({ fields: columns, data: rows }, { escapeFormulae: true })}\r\n`
}

function cells({ at, place, email, kind, purpose, amount, reference, receipt, by }: LedgerRow & { email: string }): string[] {
  // Spreadsheets read thousands their own way: none are written.
  const written = plainAmount(Math.abs(amount.minor)).replaceAll(',', '')
  return [schoolDay(new Date(at)), place.name, email, place.cohort, kind, purpose, amount.minor > 0 ? written : '', amount.minor < 0 ? written : '', amount.currency, reference, receipt ?? '', by ?? '']
}
