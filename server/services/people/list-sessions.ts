import type { EntityManager } from '@mikro-orm/postgresql'
import { Session } from '#server/db/entities/Session'
import type { Actor } from '#server/utils/actor'
import type { SessionView } from '#shared/contract/views'

/** The person's own sign-ins that still work, newest first. */
export async function listSessions(em: EntityManager, actor: Actor): Promise<SessionView[]> {
  const sessions = await em.find(Session, { user: actor.id, endedAt: null, expiresAt: { $gt: new Date() } }, { orderBy: { createdAt: 'desc' }, limit: 100 })
  return sessions.map(session => ({ id: session.id, createdAt: session.createdAt.toISOString(), expiresAt: session.expiresAt.toISOString(), agent: session.agent, thisOne: session.id === actor.sessionId }))
}
