import { createServer } from 'node:http'
import type { AddressInfo } from 'node:net'
import { encode } from '@auth/core/jwt'
import { createApp, createRouter, toNodeListener, type EventHandler, type RouterMethod } from 'h3'
import { apiFiles } from '../../scripts/lib/api-files'
import originCheck from '#server/middleware/05.origin'
import { openSession } from '#server/services/people/sign-in'
import type { Actor } from '#server/utils/actor'
import { provideApp } from '#server/utils/app'
import { sessionCookie } from '#server/utils/session'
import type { Harness } from './harness'

export interface Answer<Body = Record<string, unknown>> { status: number, body: Body, headers: Headers }
export interface Caller {
  /** Header that signs the caller in. */
  cookie: string
  sessionId: string
  get: <Body = Record<string, unknown>>(path: string) => Promise<Answer<Body>>
  /** Sends JSON; a key makes the call idempotent. */
  post: <Body = Record<string, unknown>>(path: string, body?: unknown, key?: string) => Promise<Answer<Body>>
  call: <Body = Record<string, unknown>>(method: string, path: string, body?: unknown, headers?: Record<string, string>) => Promise<Answer<Body>>
}
export interface Api {
  url: string
  /** Somebody signed in, by a session row of their own. */
  as: (who: Pick<Actor, 'id'>) => Promise<Caller>
  nobody: Caller
  close: () => Promise<void>
}

/** Serves every route file over HTTP on a port of its own, as Nitro would, with the harness's app behind it. */
export async function serveApi(harness: Harness): Promise<Api> {
  provideApp(harness.app)
  process.env.AUTH_ORIGIN = harness.config.authOrigin
  process.env.NUXT_AUTH_SECRET = harness.config.authSecret
  const app = createApp({ onError: fault => console.error(fault) })
  app.use(originCheck)
  const router = createRouter()
  for (const { absolute, path, method } of apiFiles()) {
    const { default: handler } = await import(absolute) as { default: EventHandler }
    const address = path.replace(/\/\{path\}$/, '/**').replaceAll(/\{(\w+)\}/g, ':$1')
    if (method === null) router.use(address, handler)
    else router.add(address, handler, method as RouterMethod)
  }
  app.use(router)
  const server = createServer(toNodeListener(app))
  await new Promise<void>(done => server.listen(0, '127.0.0.1', done))
  const url = `http://127.0.0.1:${(server.address() as AddressInfo).port}`

  function caller(cookie: string, sessionId: string): Caller {
    const call: Caller['call'] = async (method, path, body, headers = {}) => {
      const answer = await fetch(`${url}${path}`, {
        method,
        redirect: 'manual',
        headers: { ...(cookie ? { cookie } : {}), ...(body === undefined ? {} : { 'content-type': 'application/json' }), ...headers },
        ...(body === undefined ? {} : { body: typeof body === 'string' ? body : JSON.stringify(body) }),
      })
      const text = await answer.text()
      return { status: answer.status, body: (text === '' ? null : /json/.test(answer.headers.get('content-type') ?? '') ? JSON.parse(text) : text) as never, headers: answer.headers }
    }
    return {
      cookie, sessionId, call,
      get: path => call('GET', path),
      post: (path, body = {}, key) => call('POST', path, body, key ? { 'idempotency-key': key } : {}),
    }
  }

  return {
    url,
    nobody: caller('', ''),
    async as(who) {
      const sessionId = await openSession(harness.app.orm.em.fork(), who.id, 'a test')
      const { name } = sessionCookie()
      return caller(`${name}=${await encode({ token: { sid: sessionId }, secret: harness.config.authSecret, salt: name })}`, sessionId)
    },
    async close() {
      server.closeAllConnections()
      await new Promise(done => server.close(done))
    },
  }
}
