import type { EntityManager } from '@mikro-orm/postgresql'
import { Session } from '#server/db/entities/Session'
import { User } from '#server/db/entities/User'
import { checkPassword } from '#server/utils/passwords'
import { recordEvent } from '#server/utils/record-event'
import { sessionSeconds } from '#server/utils/session'
import { countFailure } from './sign-in-throttle'

/** The person, when e-mail and password go together; otherwise null, and the failure is counted. */
export async function findBySignIn(em: EntityManager, email: string, password: string, address: string): Promise<{ id: string, name: string, email: string } | null> {
  const user = await em.findOne(User, { email: email.trim().toLowerCase() })
  const right = await checkPassword(user?.passwordHash ?? null, password)
  if (user && right) return { id: user.id, name: user.name, email: user.email }
  await countFailure(em, email, address, new Date())
  return null
}

/** One row a sign-in; its id is what the cookie carries. */
export async function openSession(em: EntityManager, userId: string, agent: string): Promise<string> {
  return em.transactional(async (tx) => {
    const now = new Date()
    const session = tx.create(Session, { user: tx.getReference(User, userId), createdAt: now, expiresAt: new Date(now.getTime() + sessionSeconds * 1000), endedAt: null, agent: agent.slice(0, 200) })
    tx.persist(session)
    recordEvent(tx, { actor: userId, action: 'signed-in', subject: `session:${session.id}` })
    return session.id
  })
}

/** Ends one session, or all of a person's: their cookies are nobody's from now on. */
export async function endSessions(em: EntityManager, where: { sessionId: string } | { userId: string }, actor: string): Promise<number> {
  return em.transactional(async (tx) => {
    const filter = 'sessionId' in where ? { id: where.sessionId, endedAt: null } : { user: where.userId, endedAt: null }
    const ended = await tx.nativeUpdate(Session, filter, { endedAt: new Date() })
    if (ended) recordEvent(tx, { actor, action: 'sessions-ended', subject: 'sessionId' in where ? `session:${where.sessionId}` : `person:${where.userId}`, detail: { ended } })
    return ended
  })
}
