import type { EntityManager } from '@mikro-orm/postgresql'
import type { PlaceState } from '#server/db/entities/BenchPlace'
import { anywhere, keyset, type KeysetOrder } from '#server/utils/keyset'
import type { PlaceRow, PlacesQuery } from '#shared/contract/places'
import type { Page } from '#shared/contract/views'
import { dueMinor, nothingPaid, placeMoney } from './place-money'

const orders: Record<PlacesQuery['sort'], KeysetOrder> = {
  name: { by: 'lower(p.name)', direction: 'asc', type: 'text' },
  asked: { by: 'coalesce(p.asked_at, p.created_at)', direction: 'desc', type: 'timestamptz' },
  // Places without a bench come after those with one.
  slot: { by: 'coalesce(p.slot, 1000)', direction: 'asc', type: 'bigint' },
}

interface Row { id: string, page_key: string, code: string, cohort_name: string, price_minor: number, deposit_minor: number, currency: string, name: string, email: string, state: PlaceState, slot: number | null, list_number: number | null, asked_at: Date | string | null, held_until: Date | string | null, sponsor: string | null }

/** Every place of the school, a page at a time, by what the office looks for. @throws {Refusal} page_unknown */
export async function listPlaces(em: EntityManager, query: PlacesQuery): Promise<Page<PlaceRow>> {
  const page = keyset(orders[query.sort], 'p.id', query.after)
  const conditions = [page.where]
  const values: unknown[] = [...page.values]
  const add = (condition: string, ...more: unknown[]) => {
    conditions.push(condition)
    values.push(...more)
  }
  if (query.search) add('(p.name ilike ? or p.email ilike ? or s.organisation ilike ?)', ...Array<string>(3).fill(anywhere(query.search)))
  if (query.cohort) add('c.code = ?', query.cohort)
  if (query.state) add('p.state = ?', query.state)
  const rows = await em.getConnection().execute<Row[]>(
    `select p.id, ${page.select}, c.code, c.name as cohort_name, c.price_minor, c.deposit_minor, c.currency, p.name, p.email, p.state, p.slot, p.list_number, p.asked_at, p.held_until, s.organisation as sponsor
       from bench_place p join cohort c on c.id = p.cohort_id left join purchase_order o on o.place_id = p.id left join sponsor s on s.id = o.sponsor_id
      where ${conditions.join(' and ')} order by ${page.orderBy} limit ?`, [...values, query.limit + 1])
  const cut = page.cut(rows, query.limit)
  const money = await placeMoney(em, cut.rows.map(row => row.id))
  return { items: cut.rows.map(row => toRow(row, money.get(row.id) ?? nothingPaid)), next: cut.next }
}

const iso = (at: Date | string | null): string | null => at === null ? null : new Date(at).toISOString()

function toRow(row: Row, paid: typeof nothingPaid): PlaceRow {
  const amount = (minor: number) => ({ minor, currency: row.currency })
  const due = dueMinor(row.state, { priceMinor: row.price_minor, depositMinor: row.deposit_minor }, paid)
  return {
    id: row.id, cohort: { code: row.code, name: row.cohort_name }, name: row.name, email: row.email, state: row.state, slot: row.slot, listNumber: row.list_number,
    askedAt: iso(row.asked_at), heldUntil: iso(row.held_until), paid: amount(paid.paidMinor), due: due === null ? null : amount(due), sponsor: row.sponsor,
  }
}
