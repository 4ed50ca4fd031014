import type { EntityManager } from '@mikro-orm/postgresql'
import type { App } from '#server/utils/app'
import { anywhere, keyset, type KeysetOrder } from '#server/utils/keyset'
import type { ClearanceRow, ClearancesQuery } from '#shared/contract/safety'
import type { Page } from '#shared/contract/views'
import { standingClearances } from './clearance-views'
import { consentStates } from './consent-states'

interface Found { id: string, name: string, cohort: string | null, staff: boolean, needed: string[], page_key: string }

const orders: Record<ClearancesQuery['sort'], KeysetOrder> = {
  name: { by: 'p.name', direction: 'asc', type: 'text' },
  expiry: { by: 'p.first_lapse', direction: 'asc', type: 'timestamptz' },
}

/**
 * Who they are for the safety officer: staff, students with their cohort, what the route asks of those who have a bench place now or
 * soon, what they may use at an instant, and when the first of it lapses. Takes the instant twice.
 */
const people = `(
  select u."id", u."name", u."roles" && '{instructor,safety}' as staff, place."name" as cohort,
    case when place."name" is null then '{}' else array(
      select distinct t.tool from "rubric_version" r, jsonb_array_elements(r."rubric"->'stages') s, jsonb_array_elements_text(s->'clearances') t(tool)
      where r."version" = (select max("version") from "rubric_version") order by 1) end as needed,
    array(select distinct c."tool"::text from "clearance" c where c."person_id" = u."id" and c."withdrawn_at" is null and c."from" <= ? and c."until" > ?) as held,
    coalesce((select min(one.until) from (select max(c."until") as until from "clearance" c where c."person_id" = u."id" and c."withdrawn_at" is null group by c."tool") one), '9999-12-31') as first_lapse,
    exists (select 1 from "consent" c join "consent_text" t on t."id" = c."text_id" where c."person_id" = u."id"
      and t."version" >= (select "stands_from" from "consent_text" order by "version" desc limit 1)) as signed
  from "app_user" u
  left join lateral (select h."name" from "bench_place" b join "cohort" h on h."id" = b."cohort_id"
    where b."person_id" = u."id" and b."state" in ('deposit-paid', 'confirmed', 'here') order by h."starts_on" desc limit 1) place on true
)`

/** Everybody who may stand at a bench against the tools of the shop: what they may use, until when, what they lack, who has not signed. @throws {Refusal} page_unknown */
export async function listClearances(em: EntityManager, app: App, query: ClearancesQuery): Promise<Page<ClearanceRow>> {
  const page = keyset(orders[query.sort], 'p.id', query.after)
  const now = app.clock.schoolNow()
  const conditions = [page.where]
  const values: unknown[] = [now, now, ...page.values]
  if (query.who === 'current') conditions.push('(p.staff or p.cohort is not null)')
  if (query.lacking === 'consent') conditions.push('not p.signed')
  if (query.lacking === 'clearance') conditions.push('not p.needed <@ p.held')
  if (query.search) {
    conditions.push('(p.name ilike ? or p.cohort ilike ?)')
    values.push(anywhere(query.search), anywhere(query.search))
  }
  const rows = await em.getConnection().execute<Found[]>(
    `select p.id, p.name, p.cohort, p.staff, p.needed, ${page.select} from ${people} p where ${conditions.join(' and ')} order by ${page.orderBy} limit ?`,
    [...values, query.limit + 1], 'all', em.getTransactionContext())
  const { rows: shown, next } = page.cut(rows, query.limit)
  return { items: await clearanceRows(em, shown, now), next }
}

/** One person's line. Null when there is no such person. */
export async function clearanceRow(em: EntityManager, app: App, id: string): Promise<ClearanceRow | null> {
  const now = app.clock.schoolNow()
  const rows = await em.getConnection().execute<Found[]>(`select p.id, p.name, p.cohort, p.staff, p.needed, '' as page_key from ${people} p where p.id = ?`, [now, now, id], 'all', em.getTransactionContext())
  return (await clearanceRows(em, rows, now))[0] ?? null
}

async function clearanceRows(em: EntityManager, found: readonly Found[], now: Date): Promise<ClearanceRow[]> {
  const ids = found.map(one => one.id)
  const consents = await consentStates(em, ids)
  const clearances = await standingClearances(em, ids, now)
  return found.map(({ id, name, cohort, staff, needed }) => {
    const own = clearances.get(id) ?? []
    const missing = needed.filter(tool => !own.some(one => one.tool === tool && !one.lapsed))
    return { id, name, cohort, staff, consent: consents.get(id) ?? 'none', clearances: own, missing }
  })
}
