import type { EntityManager } from '@mikro-orm/postgresql'
import { Session } from '#server/db/entities/Session'
import type { Actor } from '#server/utils/actor'
import { Refusal } from '#server/utils/refusal'
import { endSessions } from './sign-in'

/** Ends one of the person's own sign-ins. @throws {Refusal} session_not_found for anybody else's, or one that ended */
export async function endOwnSession(em: EntityManager, actor: Actor, id: string): Promise<void> {
  const own = await em.findOne(Session, { id, user: actor.id, endedAt: null })
  if (!own) throw new Refusal('session_not_found')
  await endSessions(em, { sessionId: id }, actor.id)
}
