import type { EntityManager } from '@mikro-orm/postgresql'
import type { Actor } from '#server/utils/actor'
import type { App } from '#server/utils/app'
import { findPerson } from './find-person'
import { invitePerson } from './invite-person'

/** Sends somebody who never came a new link; the earlier one stops working. @throws {Refusal} person_not_found, email_taken */
export async function inviteAgain(em: EntityManager, app: App, actor: Actor, id: string): Promise<{ id: string }> {
  const { name, email, roles } = await findPerson(em, id)
  await invitePerson(em, app, actor, { name, email, roles })
  return { id }
}
