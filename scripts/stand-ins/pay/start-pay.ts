import { createHash, timingSafeEqual } from 'node:crypto'
import { createServer, type IncomingMessage, type ServerResponse } from 'node:http'
import type { AddressInfo } from 'node:net'
import { setTimeout as sleep } from 'node:timers/promises'
import { answerFaults } from '../faults'
import { hostedPage, noSuchPage } from './hosted-page'
import { PayApi, type ApiAnswer } from './pay-api'
import { PayError } from './pay-error'
import type { PayFaults } from './pay-faults'
import { PayStore } from './pay-store'
import { apiVersion, declines, Processor } from './processor'
import { readForm } from './read-form'
import { Webhooks } from './webhooks'

export type PayStandIn = {
  url: string
  faults: PayFaults
  store: PayStore
  /** Where messages go from now on; null keeps them. */
  tell: (url: string | null) => void
  close: () => Promise<void>
}
export type PayOptions = {
  dir: string
  /** The secret key every call must carry. */
  key: string
  webhookSecret: string
  webhookUrl: string | null
  host?: string
  /** 0 takes any that is free. */
  port: number
  now?: () => Date
}

const largestBody = 256 * 1024

/** A stand-in for the card processor on this machine: its API, its payment page, its signed messages. No money moves. */
export async function startPay({ dir, key, webhookSecret, webhookUrl, host = '127.0.0.1', port, now = () => new Date() }: PayOptions): Promise<PayStandIn> {
  const store = new PayStore(dir)
  const faults: PayFaults = { webhooksLost: 0, webhooksTwice: 0, webhooksLate: 0, webhooksReversed: 0, lateMs: 3_000, api429Next: 0, api500Next: 0, responseLostNext: 0, refundRefusedNext: 0, slowMs: 0 }
  let target = webhookUrl
  let url = ''
  const webhooks = new Webhooks(store, webhookSecret, faults, now, () => target)
  const processor = new Processor(store, now, events => webhooks.take(events))
  const api = new PayApi(store, processor, () => url)

  async function answerApi(request: IncomingMessage, response: ServerResponse, path: string, search: string): Promise<void> {
    const json = (status: number, body: unknown, headers: Record<string, string> = {}) => response.writeHead(status, { 'content-type': 'application/json', 'request-id': processor.id('req'), ...headers }).end(JSON.stringify(body))
    try {
      const sent = await readBody(request)
      if (faults.slowMs > 0) await sleep(faults.slowMs)
      if (!isKey(request.headers.authorization, key)) throw new PayError(401, 'invalid_request_error', 'Invalid API Key provided')
      if (request.headers['stripe-version'] !== apiVersion) throw new PayError(400, 'invalid_request_error', `This stand-in speaks version ${apiVersion}.`)
      if (faults.api429Next > 0) {
        faults.api429Next--
        throw new PayError(429, 'invalid_request_error', 'Too many requests hit the API too quickly.', { code: 'rate_limit' })
      }
      if (faults.api500Next > 0) {
        faults.api500Next--
        throw new PayError(500, 'api_error', 'Something went wrong on our end.')
      }
      const lost = faults.responseLostNext > 0
      if (lost) faults.responseLostNext--
      const { status, body, again } = once(request, path, request.method === 'GET' ? search : sent)
      if (lost) request.socket.destroy()
      else json(status, body, again ? { 'idempotent-replayed': 'true' } : {})
    }
    catch (thrown) {
      if (!(thrown instanceof PayError)) throw thrown
      json(thrown.status, thrown.toBody())
    }
  }

  /** Does the work, or gives the first answer to its key again. Nothing here waits, so no two calls mix. */
  function once(request: IncomingMessage, path: string, sent: string): { status: number, body: unknown, again: boolean } {
    const method = request.method ?? ''
    const id = method === 'POST' ? request.headers['idempotency-key'] : undefined
    if (typeof id !== 'string') return { ...keep(work(method, path, sent), null), again: false }
    if (id.length > 255) throw new PayError(400, 'invalid_request_error', 'An idempotency key has at most 255 characters.')
    const asked = createHash('sha256').update(`${method} ${path}\n${sent}`).digest('hex')
    const first = store.get('keys', id)
    if (!first) return { ...keep(work(method, path, sent), { id, asked }), again: false }
    if (first.asked !== asked) throw new PayError(400, 'idempotency_error', `Keys for idempotent requests can only be used with the same parameters they were first used with. Try using a key other than '${id}' if you meant to execute a different request.`)
    return { status: first.status, body: first.body, again: true }
  }

  function work(method: string, path: string, sent: string): ApiAnswer {
    if (method === 'POST' && path === '/v1/refunds' && faults.refundRefusedNext > 0) {
      faults.refundRefusedNext--
      throw new PayError(400, 'invalid_request_error', 'The card issuer does not take this refund.')
    }
    return api.answer(method, path, readForm(sent))
  }

  function keep({ status, body, changes, happened }: ApiAnswer, asked: { id: string, asked: string } | null) {
    if (asked) processor.commit([...changes, ['keys', { ...asked, status, body }]], happened)
    else if (changes.length > 0) processor.commit(changes, happened)
    return { status, body }
  }

  function answerPage(request: IncomingMessage, response: ServerResponse, id: string, action: string | undefined): void {
    const session = processor.session(id)
    const html = (status: number, text: string) => response.writeHead(status, {
      'content-type': 'text/html; charset=utf-8', 'x-content-type-options': 'nosniff', 'cache-control': 'no-store',
      // No form-action: after paying, the form's answer leads back to the shop.
      'content-security-policy': 'default-src \'none\'; style-src \'unsafe-inline\'; frame-ancestors \'none\'',
    }).end(text)
    const show = (said: string | null, status = 200) => {
      const fresh = store.get('sessions', id)
      if (fresh) html(status, hostedPage(fresh, store.get('insides', id)?.items ?? [], said))
    }
    const goTo = (address: string) => void response.writeHead(303, { location: address }).end()
    const success = (address: string) => goTo(address.replaceAll('{CHECKOUT_SESSION_ID}', id))

    if (!session) html(404, noSuchPage())
    else if (action === undefined && request.method === 'GET') show(null)
    else if (request.method !== 'POST') response.writeHead(405, { allow: action === undefined ? 'GET' : 'POST' }).end()
    else if (action === 'pay') {
      processor.pay(session)
      if (session.status === 'expired') show(null)
      else success(session.success_url)
    }
    else if (action === 'declined' || action === 'insufficient') {
      processor.decline(session, action)
      show(session.status === 'open' ? `${declines[action].message} Nothing was taken; try again.` : null)
    }
    else if (action === 'expire') {
      if (session.status === 'open') processor.expire(session)
      show(null)
    }
    else html(404, noSuchPage())
  }

  async function answer(request: IncomingMessage, response: ServerResponse): Promise<void> {
    if (await answerFaults(faults, request, response)) return
    const { pathname, search } = new URL(request.url ?? '/', 'http://stand-in')
    const [, id, action] = /^\/pay\/(cs_test_[0-9a-f]+)(?:\/([a-z]+))?$/.exec(pathname) ?? []
    if (pathname.startsWith('/v1/')) await answerApi(request, response, pathname, search.slice(1))
    else if (id !== undefined) {
      request.resume()
      answerPage(request, response, id, action)
    }
    else response.writeHead(404, { 'content-type': 'text/html; charset=utf-8' }).end(noSuchPage())
  }

  const server = createServer((request, response) => void answer(request, response).catch((thrown: unknown) => {
    console.error('card payment stand-in:', thrown)
    if (response.headersSent) response.destroy()
    else response.writeHead(500).end()
  }))
  await new Promise<void>((resolve, reject) => {
    server.once('error', reject)
    server.listen(port, host, resolve)
  }).catch((thrown: unknown) => {
    store.close()
    throw thrown
  })
  url = `http://${host.includes(':') ? `[${host}]` : host}:${(server.address() as AddressInfo).port}`
  webhooks.resume()
  const clock = setInterval(() => processor.tick(), 1000)
  clock.unref()

  return {
    url,
    faults,
    store,
    tell(to) {
      target = to
      webhooks.resume()
    },
    async close() {
      clearInterval(clock)
      webhooks.close()
      server.closeAllConnections()
      await new Promise<void>(resolve => server.close(() => resolve()))
      store.close()
    },
  }
}

function isKey(header: string | undefined, key: string): boolean {
  const digest = (text: string) => createHash('sha256').update(text).digest()
  return timingSafeEqual(digest(header ?? ''), digest(`Bearer ${key}`))
}

async function readBody(request: IncomingMessage): Promise<string> {
  const chunks: Buffer[] = []
  let size = 0
  for await (const chunk of request as AsyncIterable<Buffer>) {
    size += chunk.length
    if (size > largestBody) throw new PayError(413, 'invalid_request_error', 'The body is too large.')
    chunks.push(chunk)
  }
  const type = request.headers['content-type'] ?? ''
  if (size > 0 && !type.startsWith('application/x-www-form-urlencoded')) throw new PayError(400, 'invalid_request_error', `The body should be a form, not ${type || 'of no type'}.`)
  return Buffer.concat(chunks).toString('utf8')
}
