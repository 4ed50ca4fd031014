import { getToken } from '@auth/core/jwt'
import type { EntityManager } from '@mikro-orm/postgresql'
import type { H3Event } from 'h3'
import { Session } from '../db/entities/Session'
import type { Actor } from './actor'

export const sessionSeconds = 12 * 3600

/** The cookie's name follows Auth.js: the secure prefix goes with https. */
export function sessionCookie(): { name: string, secure: boolean } {
  const secure = (process.env.AUTH_ORIGIN ?? '').startsWith('https:')
  return { name: `${secure ? '__Secure-' : ''}authjs.session-token`, secure }
}

/** The signed-in person, read fresh from their rows, or null. A session that was ended or ran out is nobody. */
export async function readSession(event: H3Event, em: EntityManager): Promise<Actor | null> {
  const { name, secure } = sessionCookie()
  const token = await getToken({ req: { headers: event.headers }, secret: process.env.NUXT_AUTH_SECRET ?? '', secureCookie: secure, salt: name, cookieName: name }).catch(() => null)
  return token?.sid ? findActor(em, String(token.sid)) : null
}

/** The person a live session row belongs to. */
export async function findActor(em: EntityManager, sessionId: string): Promise<Actor | null> {
  const session = await em.findOne(Session, { id: sessionId, endedAt: null, expiresAt: { $gt: new Date() } }, { populate: ['user'] })
  const user = session?.user.get()
  if (!session || !user) return null
  return { id: user.id, name: user.name, email: user.email, roles: user.roles, unit: user.unit, sessionId: session.id }
}
