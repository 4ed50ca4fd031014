import type { EntityManager } from '@mikro-orm/postgresql'
import type { Actor } from '#server/utils/actor'
import { recordEvent } from '#server/utils/record-event'
import { findPerson } from './find-person'

/** Corrects a name. The record says that it was, not what it was: names stay out of it. @throws {Refusal} person_not_found */
export async function renamePerson(em: EntityManager, actor: Actor, id: string, name: string): Promise<{ id: string, name: string }> {
  return em.transactional(async (tx) => {
    const person = await findPerson(tx, id, { lock: true })
    if (person.name === name) return { id, name }
    person.name = name
    recordEvent(tx, { actor: actor.id, action: 'person-renamed', subject: `person:${id}` })
    return { id, name }
  })
}
