import type { EntityManager } from '@mikro-orm/postgresql'
import type { z } from 'zod'
import { hasRole, type Actor } from '#server/utils/actor'
import type { App } from '#server/utils/app'
import { anywhere, keyset, type KeysetOrder } from '#server/utils/keyset'
import type { AuditRow, auditQuery } from '#shared/contract/office'
import type { Page } from '#shared/contract/views'
import { staffLinks } from '../review/staff-links'

type Query = z.output<typeof auditQuery>
const orders: Record<Query['sort'], KeysetOrder> = {
  newest: { by: 'e.at', direction: 'desc', type: 'timestamptz' },
  oldest: { by: 'e.at', direction: 'asc', type: 'timestamptz' },
}
interface Row { id: string, page_key: string, at: string, actor: string, name: string | null, action: string, subject: string, about: string | null, detail: string, number: number | null, sealed: boolean }

/** What a safety officer answers for: tools, consent, stops. */
const safetyActions = ['head-stopped', 'stop-lifted', 'clearance-given', 'clearance-withdrawn', 'consent-signed', 'consent-text-saved', 'safety-note-changed']

/** Heads of these cohorts and everything that hangs on them. */
const ofCohorts = `(
  (e.subject like 'head:%' and exists (select 1 from practice_head h where h.id::text = substr(e.subject, 6) and h.cohort_id = any(?)))
  or (e.subject like 'submission:%' and exists (select 1 from submission s join practice_head h on h.id = s.head_id where s.id::text = substr(e.subject, 12) and h.cohort_id = any(?))))`

/**
 * The audit record, newest or oldest first: all of it for an admin, one's own cohorts' heads for an instructor, safety's events for the
 * safety officer. Names are looked up to read by; the record itself holds ids alone.
 *
 * @throws {Refusal} page_unknown
 */
export async function listEvents(em: EntityManager, app: App, actor: Actor, query: Query): Promise<Page<AuditRow>> {
  const page = keyset(orders[query.sort], 'e.id', query.after)
  const where = [page.where]
  const values: unknown[] = [...page.values]
  if (!hasRole(actor, 'admin')) {
    const cohorts = `{${[...(await staffLinks(em, actor, app.clock.schoolNow())).keys()].join(',')}}`
    const mine = [ofCohorts, ...(hasRole(actor, 'safety') ? [`e.action = any(?)`] : [])]
    where.push(`(${mine.join(' or ')})`)
    values.push(cohorts, cohorts, ...(hasRole(actor, 'safety') ? [`{${safetyActions.join(',')}}`] : []))
  }
  if (query.action) {
    where.push('e.action = ?')
    values.push(query.action)
  }
  if (query.from) {
    where.push('e.at >= ?::timestamptz')
    values.push(query.from)
  }
  if (query.search) {
    where.push('(e.subject ilike ? or e.action ilike ? or e.detail ilike ? or u.name ilike ? or about.name ilike ?)')
    values.push(...Array.from({ length: 5 }, () => anywhere(query.search ?? '')))
  }
  const rows = await em.getConnection().execute<Row[]>(
    `select e.id, ${page.select}, e.at, e.actor, u.name, e.action, e.subject, about.name as about, e.detail, l.number,
       exists (select 1 from audit_seal s where s.number >= l.number) as sealed
     from audit_event e
     left join audit_link l on l.event_id = e.id
     left join app_user u on u.id::text = e.actor
     left join app_user about on e.subject like 'person:%' and about.id::text = substr(e.subject, 8)
     where ${where.join(' and ')} order by ${page.orderBy} limit ?`, [...values, query.limit + 1])
  const { rows: shown, next } = page.cut(rows, query.limit)
  return {
    items: shown.map(row => ({
      id: row.id,
      number: row.number,
      sealed: row.sealed,
      at: new Date(row.at).toISOString(),
      actor: row.name ?? row.actor,
      action: row.action,
      subject: row.about === null ? row.subject : `person ${row.about}`,
      detail: row.detail,
    })),
    next,
  }
}
