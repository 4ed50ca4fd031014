import { LockMode, type EntityManager } from '@mikro-orm/postgresql'
import { User } from '#server/db/entities/User'
import { Refusal } from '#server/utils/refusal'

/** @throws {Refusal} person_not_found */
export async function findPerson(em: EntityManager, id: string, { lock = false } = {}): Promise<User> {
  const person = await em.findOne(User, { id }, lock ? { lockMode: LockMode.PESSIMISTIC_WRITE } : {})
  if (!person) throw new Refusal('person_not_found')
  return person
}
