import type { EntityManager } from '@mikro-orm/postgresql'
import { anywhere, keyset, type KeysetOrder } from '#server/utils/keyset'
import type { MailRow, MailsQuery } from '#shared/contract/office'
import type { Page } from '#shared/contract/views'

interface Found { id: string, template: string, to: string, person_id: string | null, name: string | null, subject: string, state: MailRow['state'], tries: number, problem: string | null, created_at: Date | string, sent_at: Date | string | null, page_key: string }

const orders: Record<MailsQuery['sort'], KeysetOrder> = {
  newest: { by: 'm."created_at"', direction: 'desc', type: 'timestamptz' },
  oldest: { by: 'm."created_at"', direction: 'asc', type: 'timestamptz' },
}

/** Messages of the outbox with what became of each, of one person or of everybody. What they say is not answered: links in them are their reader's. @throws {Refusal} page_unknown */
export async function listMails(em: EntityManager, query: MailsQuery): Promise<Page<MailRow>> {
  const page = keyset(orders[query.sort], 'm."id"', query.after)
  const conditions = [page.where]
  const values: unknown[] = [...page.values]
  const only = (condition: string, ...given: unknown[]) => {
    conditions.push(condition)
    values.push(...given)
  }
  if (query.person) only('m."person_id" = ?', query.person)
  if (query.state) only('m."state" = ?', query.state)
  if (query.template) only('m."template" = ?', query.template)
  if (query.search) only('(m."subject" ilike ? or m."to" ilike ? or u."name" ilike ?)', anywhere(query.search), anywhere(query.search), anywhere(query.search))
  const rows = await em.getConnection().execute<Found[]>(
    `select m."id", m."template", m."to", m."person_id", u."name", m."subject", m."state", m."tries", m."problem", m."created_at", m."sent_at", ${page.select}
       from "mail" m left join "app_user" u on u."id" = m."person_id" where ${conditions.join(' and ')} order by ${page.orderBy} limit ?`,
    [...values, query.limit + 1], 'all', em.getTransactionContext())
  const { rows: shown, next } = page.cut(rows, query.limit)
  const iso = (at: Date | string) => new Date(at).toISOString()
  return {
    items: shown.map(row => ({
      id: row.id, template: row.template, to: row.to, person: row.person_id === null ? null : { id: row.person_id, name: row.name ?? '' }, subject: row.subject,
      state: row.state, tries: row.tries, problem: row.problem, createdAt: iso(row.created_at), sentAt: row.sent_at === null ? null : iso(row.sent_at),
    })),
    next,
  }
}
