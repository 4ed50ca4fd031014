import type { EntityManager } from '@mikro-orm/postgresql'
import type { z } from 'zod'
import { BenchPlace } from '#server/db/entities/BenchPlace'
import { User } from '#server/db/entities/User'
import { anywhere, keyset, type KeysetOrder } from '#server/utils/keyset'
import type { peopleQuery } from '#shared/contract/office'
import type { Page, PersonView } from '#shared/contract/views'

const orders: Record<z.output<typeof peopleQuery>['sort'], KeysetOrder> = {
  name: { by: 'u.name', direction: 'asc', type: 'text' },
  newest: { by: 'u.created_at', direction: 'desc', type: 'timestamptz' },
}

/** Everybody with an account, found by name or e-mail, a page at a time. @throws {Refusal} page_unknown */
export async function listPeople(em: EntityManager, query: z.output<typeof peopleQuery>): Promise<Page<PersonView>> {
  const page = keyset(orders[query.sort], 'u.id', query.after)
  const where = [page.where]
  const values: unknown[] = [...page.values]
  if (query.search) {
    where.push('(u.name ilike ? or u.email ilike ?)')
    values.push(anywhere(query.search), anywhere(query.search))
  }
  if (query.role) {
    where.push('? = any(u.roles)')
    values.push(query.role)
  }
  const rows = await em.getConnection().execute<{ id: string, page_key: string }[]>(
    `select u.id, ${page.select} from app_user u where ${where.join(' and ')} order by ${page.orderBy} limit ?`, [...values, query.limit + 1])
  const { rows: shown, next } = page.cut(rows, query.limit)
  const ids = shown.map(row => row.id)
  const people = new Map((await em.find(User, { id: { $in: ids } })).map(person => [person.id, person]))
  const places = await em.find(BenchPlace, { person: { $in: ids } }, { populate: ['cohort'] })
  const items = ids.flatMap((id): PersonView[] => {
    const person = people.get(id)
    return person
      ? [{ id, name: person.name, email: person.email, roles: person.roles, cohorts: places.filter(place => place.person?.id === id).map(place => place.cohort.$.name), invited: person.passwordHash === null }]
      : []
  })
  return { items, next }
}
