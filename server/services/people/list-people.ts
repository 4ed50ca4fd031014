import type { EntityManager } from '@mikro-orm/postgresql'
import type { Page, PersonView } from '#shared/contract/views'
import { BenchPlace } from '#server/db/entities/BenchPlace'
import { User } from '#server/db/entities/User'
import { Refusal } from '#server/utils/refusal'

/** Everybody with an account, by name, a page at a time. `after` is "<name>|<id>" of the last one seen. */
export async function listPeople(em: EntityManager, page: { after?: string, limit: number }): Promise<Page<PersonView>> {
  const [, name, id] = /^(.+)\|([0-9a-f-]{36})$/.exec(page.after ?? '') ?? []
  if (page.after !== undefined && !id) throw new Refusal('page_unknown')
  const past = name && id ? { $or: [{ name: { $gt: name } }, { name, id: { $gt: id } }] } : {}
  const people = await em.find(User, past, { orderBy: { name: 'asc', id: 'asc' }, limit: page.limit + 1 })
  const shown = people.slice(0, page.limit)
  const places = await em.find(BenchPlace, { person: { $in: shown.map(person => person.id) } }, { populate: ['cohort'] })
  const last = shown.at(-1)
  return {
    items: shown.map(person => ({
      id: person.id,
      name: person.name,
      email: person.email,
      roles: person.roles,
      cohorts: places.filter(place => place.person.id === person.id).map(place => place.cohort.get().name),
      invited: person.passwordHash === null,
    })),
    next: people.length > page.limit && last ? `${last.name}|${last.id}` : null,
  }
}
