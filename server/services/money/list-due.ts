import type { EntityManager } from '@mikro-orm/postgresql'
import type { App } from '#server/utils/app'
import type { DueRow } from '#shared/contract/money'
import { schoolDay } from '#shared/contract/school-day'
import { balanceDueOn } from '#shared/domain/money/balance-due-on'
import { daysBetween } from '#shared/domain/money/calendar-days'

interface Row { id: string, name: string, email: string, cohort: string, currency: string, starts_on: string, minor: number, number: string | null, due_at: Date | null, deposit_paid_at: Date | null }

/**
 * What is owed for places that are booked, or were and are finished: the price less what the ledger says was paid. With a purchase
 * order it falls due when the order does. Soonest first.
 */
export async function listDue(em: EntityManager, app: Pick<App, 'clock'>): Promise<DueRow[]> {
  const rows = await em.getConnection().execute<Row[]>(`
    select * from (
      select p.id, coalesce(u.name, p.name) as name, coalesce(u.email, p.email) as email, c.code as cohort, c.currency, to_char(c.starts_on, 'YYYY-MM-DD') as starts_on, o.number, o.due_at, p.deposit_paid_at,
        greatest(c.price_minor, coalesce(o.amount_minor, 0)) - coalesce((select sum(l.amount_minor) from ledger_line l where l.place_id = p.id and l.purpose <> 'renewal'), 0)::int as minor
      from bench_place p
      join cohort c on c.id = p.cohort_id
      left join app_user u on u.id = p.person_id
      left join purchase_order o on o.place_id = p.id
      where p.state in ('deposit-paid', 'confirmed', 'here', 'finished')
    ) as owed where minor > 0`)
  const today = schoolDay(app.clock.schoolNow())
  return rows
    .map((row): DueRow => {
      const dueOn = row.due_at ? schoolDay(new Date(row.due_at)) : balanceDueOn(row.starts_on, row.deposit_paid_at ? schoolDay(new Date(row.deposit_paid_at)) : null)
      return {
        id: row.id, place: { id: row.id, name: row.name, email: row.email, cohort: row.cohort }, amount: { minor: row.minor, currency: row.currency }, dueOn,
        daysLate: Math.max(0, daysBetween(dueOn, today)), how: row.number === null ? 'card or bank' : 'purchase order', order: row.number,
      }
    })
    .sort((a, b) => a.dueOn === b.dueOn ? a.place.name.localeCompare(b.place.name, 'en') : a.dueOn < b.dueOn ? -1 : 1)
}
