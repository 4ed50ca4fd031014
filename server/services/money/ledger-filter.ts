import type { z } from 'zod'
import type { ledgerFilter } from '#shared/contract/money'
import { startOfDay } from '#shared/contract/school-day'
import { dayAfter } from '#shared/domain/money/calendar-days'
import { anywhere } from '#server/utils/keyset'

/** Tables every reading of the ledger begins with. */
export const ledgerTables = `from ledger_line l
  join bench_place p on p.id = l.place_id
  join cohort c on c.id = p.cohort_id
  left join app_user u on u.id = p.person_id
  left join app_user w on w.id = l.by_id
  left join receipt r on r.line_id = l.id`

/** A receipt's number as it is printed. */
export const receiptText = `'S-' || lpad(r.number::text, 6, '0')`

/** What of the ledger was asked for, as SQL. Days are the school's, first and last included. */
export function ledgerWhere(filter: z.output<typeof ledgerFilter>): { where: string[], values: unknown[] } {
  const where: string[] = []
  const values: unknown[] = []
  const add = (condition: string, ...more: unknown[]) => {
    where.push(condition)
    values.push(...more)
  }
  if (filter.search) {
    const text = anywhere(filter.search)
    add(`(coalesce(u.name, p.name) ilike ? or coalesce(u.email, p.email) ilike ? or l.reference ilike ? or ${receiptText} ilike ?)`, text, text, text, text)
  }
  if (filter.cohort) add('c.code = ?', filter.cohort)
  if (filter.kind) add('l.kind = ?', filter.kind)
  if (filter.from) add('l.at >= ?', startOfDay(filter.from))
  if (filter.until) add('l.at < ?', startOfDay(dayAfter(filter.until, 1)))
  return { where, values }
}
