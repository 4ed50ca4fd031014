import type { EntityManager } from '@mikro-orm/postgresql'
import type { Actor } from '#server/utils/actor'
import { findPerson } from './find-person'
import { endSessions } from './sign-in'

/** Ends every sign-in of a person: a lost phone, somebody who left. @throws {Refusal} person_not_found */
export async function endPersonsSessions(em: EntityManager, actor: Actor, id: string): Promise<{ ended: number }> {
  await findPerson(em, id)
  return { ended: await endSessions(em, { userId: id }, actor.id) }
}
