import { Auth, type AuthConfig } from '@auth/core'
import Credentials from '@auth/core/providers/credentials'
import { getRequestIP, setResponseHeader, type H3Event } from 'h3'
import { placeStatesOf } from '../services/people/place-states-of'
import { endSessions, findBySignIn, openSession } from '../services/people/sign-in'
import { refuseTooManyTries } from '../services/people/sign-in-throttle'
import { answerProblem } from './answer-problem'
import { getApp, type App } from './app'
import { readBodyWithin } from './read-body'
import { findActor, sessionCookie, sessionSeconds } from './session'

/** Answers Auth.js's own routes. The module's client speaks version 4's dialect in two spots; both are mended here. */
export async function handleAuth(event: H3Event): Promise<unknown> {
  try {
    const app = await getApp()
    const address = getRequestIP(event) ?? 'unknown'
    const url = new URL(event.path, app.config.authOrigin)
    const headers = new Headers(event.headers)
    headers.delete('content-length')
    let body: string | undefined
    if (event.method === 'POST') {
      body = (await readBodyWithin(event, 16_384)).toString('utf8')
      if ((headers.get('content-type') ?? '').includes('x-www-form-urlencoded')) {
        const form = new URLSearchParams(body)
        if (form.get('json') === 'true') headers.set('x-auth-return-redirect', '1')
        for (const [key, value] of [...form]) if (value === 'undefined') form.delete(key)
        if (url.pathname.endsWith('/callback/credentials')) await refuseTooManyTries(app.orm.em.fork(), form.get('email') ?? '', address, new Date())
        body = form.toString()
      }
    }
    return await Auth(new Request(url, { method: event.method, headers, body }), authConfig(app, address, headers.get('user-agent') ?? ''))
  }
  catch (thrown) {
    setResponseHeader(event, 'cache-control', 'no-store')
    return answerProblem(event, thrown)
  }
}

function authConfig(app: App, address: string, agent: string): AuthConfig {
  return {
    basePath: '/api/auth',
    secret: app.config.authSecret,
    trustHost: true,
    useSecureCookies: sessionCookie().secure,
    session: { strategy: 'jwt', maxAge: sessionSeconds },
    pages: { signIn: '/login', error: '/login' },
    logger: { error: fault => fault.name === 'CredentialsSignin' ? undefined : console.error('sign-in:', fault.name, fault.message), warn: () => undefined, debug: () => undefined },
    providers: [Credentials({
      credentials: { email: { type: 'email' }, password: { type: 'password' } },
      async authorize(given) {
        const { email, password } = given
        if (typeof email !== 'string' || typeof password !== 'string' || email.length > 254 || password.length > 200 || email.includes('\0') || !email.isWellFormed() || !password.isWellFormed()) return null
        return findBySignIn(app.orm.em.fork(), email, password, address)
      },
    })],
    callbacks: {
      async jwt({ token, user }) {
        const em = app.orm.em.fork()
        if (user?.id) token.sid = await openSession(em, user.id, agent)
        const actor = token.sid ? await findActor(em, String(token.sid)) : null
        if (!actor) return null
        return { sid: token.sid, sub: actor.id }
      },
      async session({ session, token }) {
        const em = app.orm.em.fork()
        const actor = await findActor(em, String(token.sid))
        if (!actor) return { expires: session.expires }
        return { expires: session.expires, user: { id: actor.id, name: actor.name, email: actor.email, roles: actor.roles, unit: actor.unit, places: await placeStatesOf(em, actor) } }
      },
    },
    events: {
      async signOut(message) {
        const sid = 'token' in message ? message.token?.sid : undefined
        if (sid) await endSessions(app.orm.em.fork(), { sessionId: String(sid) }, String(('token' in message && message.token?.sub) || 'person'))
      },
    },
  }
}
