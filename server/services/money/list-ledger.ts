import type { EntityManager } from '@mikro-orm/postgresql'
import type { z } from 'zod'
import type { App } from '#server/utils/app'
import { keyset, type KeysetOrder } from '#server/utils/keyset'
import { schoolDetails } from '#server/services/school/school-details'
import type { LedgerRow, ledgerQuery, MoneyBookView, MoneySums } from '#shared/contract/money'
import { ledgerTables, ledgerWhere, receiptText } from './ledger-filter'
import { listDue } from './list-due'

export const ledgerOrders: Record<z.output<typeof ledgerQuery>['sort'], KeysetOrder> = {
  newest: { by: 'l.at', direction: 'desc', type: 'timestamptz' },
  oldest: { by: 'l.at', direction: 'asc', type: 'timestamptz' },
  amount: { by: 'abs(l.amount_minor)', direction: 'desc', type: 'bigint' },
}

interface Row { id: string, page_key: string | number, at: Date, place_id: string, name: string, email: string, cohort: string, kind: string, purpose: string, minor: number, currency: string, reference: string, receipt: string | null, written_by: string | null }

/** Lines of the ledger as asked for, a page at a time. */
export async function readLedger(em: EntityManager, query: z.output<typeof ledgerQuery>): Promise<{ items: (LedgerRow & { email: string })[], next: string | null }> {
  const page = keyset(ledgerOrders[query.sort], 'l.id', query.after)
  const { where, values } = ledgerWhere(query)
  const rows = await em.getConnection().execute<Row[]>(`
    select l.id, ${page.select}, l.at, l.place_id, coalesce(u.name, p.name) as name, coalesce(u.email, p.email) as email, c.code as cohort, l.kind, l.purpose, l.amount_minor as minor, l.currency, l.reference,
      ${receiptText} as receipt, w.name as written_by
    ${ledgerTables} where ${[...where, page.where].join(' and ')} order by ${page.orderBy} limit ?`, [...values, ...page.values, query.limit + 1])
  const { rows: shown, next } = page.cut(rows, query.limit)
  return {
    items: shown.map(row => ({
      id: row.id, at: new Date(row.at).toISOString(), place: { id: row.place_id, name: row.name, cohort: row.cohort }, email: row.email, kind: row.kind, purpose: row.purpose,
      amount: { minor: row.minor, currency: row.currency }, reference: row.reference, receipt: row.receipt, by: row.written_by,
    })),
    next,
  }
}

/** The money book: lines as asked for, the sums of all of them, and what is still due to the school. @throws {Refusal} page_unknown */
export async function listLedger(em: EntityManager, app: Pick<App, 'clock'>, query: z.output<typeof ledgerQuery>): Promise<MoneyBookView> {
  const { items, next } = await readLedger(em, query)
  return { items: items.map(({ email: _email, ...row }) => row), next, sums: await sumsOf(em, app, query) }
}

async function sumsOf(em: EntityManager, app: Pick<App, 'clock'>, query: z.output<typeof ledgerQuery>): Promise<MoneySums> {
  const { where, values } = ledgerWhere(query)
  const { currency } = await schoolDetails(em)
  const sum = (kinds: string) => `coalesce(sum(l.amount_minor) filter (where l.kind in (${kinds})), 0)::float8`
  const [row] = await em.getConnection().execute<{ in: number, out: number, moved: number }[]>(
    `select ${sum(`'card', 'bank'`)} as in, ${sum(`'card-refund', 'bank-refund'`)} as out, ${sum(`'moved-in', 'moved-out'`)} as moved ${ledgerTables} where ${['true', ...where].join(' and ')}`, values)
  const { in: came, out, moved } = row ?? { in: 0, out: 0, moved: 0 }
  const due = (await listDue(em, app)).reduce((total, one) => total + one.amount.minor, 0)
  const amount = (minor: number) => ({ minor, currency })
  return { in: amount(came), out: amount(out), moved: amount(moved), balance: amount(came + out + moved), due: amount(due) }
}
