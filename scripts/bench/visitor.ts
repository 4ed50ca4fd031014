import { Problem } from '../lib/problem'

/** Somebody signed in to a running school, calling it as a browser would. */
export interface Visitor {
  name: string
  cookie: string
  get: <T>(path: string) => Promise<T>
  /** Sends JSON; answers whatever the status. */
  post: <T>(path: string, body: unknown) => Promise<{ status: number, body: T }>
}

/**
 * Signs one of the demo school's people in.
 *
 * @throws {Problem} when the school does not know them
 */
export async function signInAs(url: string, firstName: string): Promise<Visitor> {
  const csrf = await fetch(`${url}/api/auth/csrf`)
  const { csrfToken } = await csrf.json() as { csrfToken: string }
  const answer = await fetch(`${url}/api/auth/callback/credentials`, {
    method: 'POST', redirect: 'manual', headers: { cookie: cookiesOf(csrf) },
    body: new URLSearchParams({ email: `${firstName.toLowerCase()}@sallowbeck.example`, password: 'slow-hands-true-numbers', csrfToken, json: 'true' }),
  })
  const cookie = cookiesOf(answer)
  const call = (path: string, init: RequestInit = {}) => fetch(`${url}${path}`, { ...init, headers: { cookie, ...init.headers } })
  if ((await call('/api/me')).status !== 200) throw new Problem(`${firstName} could not be signed in (${answer.status}).`)
  return {
    name: firstName,
    cookie,
    async get<T>(path: string) {
      const found = await call(path)
      if (!found.ok) throw new Problem(`${firstName} could not read ${path}: ${found.status} ${await found.text()}`)
      return await found.json() as T
    },
    async post<T>(path: string, body: unknown) {
      const sent = await call(path, { method: 'POST', headers: { 'content-type': 'application/json', 'idempotency-key': crypto.randomUUID() }, body: JSON.stringify(body) })
      return { status: sent.status, body: await sent.json().catch(() => null) as T }
    },
  }
}

const cookiesOf = (answer: Response): string => answer.headers.getSetCookie().map(line => line.split(';')[0]).join('; ')
