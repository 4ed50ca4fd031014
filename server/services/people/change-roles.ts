import { LockMode, type EntityManager } from '@mikro-orm/postgresql'
import { User, type Role } from '#server/db/entities/User'
import type { Actor } from '#server/utils/actor'
import { recordEvent } from '#server/utils/record-event'
import { Refusal } from '#server/utils/refusal'

/**
 * Gives a person these roles and no others; it counts from their next request. Nobody takes the admin's role from themselves, and
 * so the school is never without one.
 *
 * @throws {Refusal} person_not_found, own_admin_role
 */
export async function changeRoles(em: EntityManager, actor: Actor, id: string, wanted: readonly Role[]): Promise<{ id: string, roles: Role[] }> {
  const roles = [...new Set(wanted)]
  return em.transactional(async (tx) => {
    // In one order, and all admins, so that two of them cannot take the role from each other at once.
    const people = await tx.find(User, { $or: [{ id }, { roles: { $contains: ['admin'] } }] }, { lockMode: LockMode.PESSIMISTIC_WRITE, orderBy: { id: 'asc' } })
    const person = people.find(one => one.id === id)
    if (!person) throw new Refusal('person_not_found')
    const acting = people.find(one => one.id === actor.id)
    if (!acting?.roles.includes('admin')) throw new Refusal('not_allowed')
    if (person.id === actor.id && !roles.includes('admin')) throw new Refusal('own_admin_role')
    const before = [...person.roles]
    if (before.length === roles.length && before.every(role => roles.includes(role))) return { id, roles: before }
    person.roles = roles
    recordEvent(tx, { actor: actor.id, action: 'roles-changed', subject: `person:${id}`, detail: { before, after: roles } })
    return { id, roles }
  })
}
