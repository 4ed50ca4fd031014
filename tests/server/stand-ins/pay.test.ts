import { createHmac } from 'node:crypto'
import { appendFileSync, mkdtempSync, rmSync } from 'node:fs'
import { createServer, type Server } from 'node:http'
import type { AddressInfo } from 'node:net'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { text } from 'node:stream/consumers'
import Stripe from 'stripe'
import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import { readForm } from '../../../scripts/stand-ins/pay/read-form'
import { startPay, type PayStandIn } from '../../../scripts/stand-ins/pay/start-pay'
import { waitUntil } from '../../../scripts/lib/wait-until'

const key = 'sk_test_stand_in'
const webhookSecret = 'whsec_stand_in'
let dir: string
let pay: PayStandIn
let nowMs: number
let heard: Server | null

const start = (webhookUrl: string | null = null) => startPay({ dir, key, webhookSecret, webhookUrl, port: 0, now: () => new Date(nowMs) })
const client = (secret = key, maxNetworkRetries = 0) => {
  const { hostname: host, port } = new URL(pay.url)
  return new Stripe(secret, { host, port, protocol: 'http', telemetry: false, maxNetworkRetries, timeout: 5000 })
}
const seconds = () => Math.floor(nowMs / 1000)
const order = (more: Partial<Stripe.Checkout.SessionCreateParams> = {}): Stripe.Checkout.SessionCreateParams => ({
  mode: 'payment', client_reference_id: 'ours', line_items: [{ quantity: 1, price_data: { currency: 'gbp', unit_amount: 35_000, product_data: { name: 'Deposit <b>' } } }], customer_email: 'agnes@sallowbeck.example',
  success_url: 'http://127.0.0.1:3000/done?s={CHECKOUT_SESSION_ID}', cancel_url: 'http://127.0.0.1:3000/back', metadata: { payment: 'ours' }, payment_intent_data: { metadata: { payment: 'ours' } }, ...more,
})
const session = (more: Partial<Stripe.Checkout.SessionCreateParams> = {}, idempotencyKey?: string) => client().checkout.sessions.create(order(more), idempotencyKey ? { idempotencyKey } : {})
const press = (url: string | null, button: string) => fetch(`${url}/${button}`, { method: 'POST', redirect: 'manual' })
const failure = (promise: Promise<unknown>) => promise.then(() => 'no failure', (thrown: Stripe.errors.StripeError) => `${thrown.statusCode} ${thrown.rawType ?? thrown.type}${thrown.code ? ` ${thrown.code}` : ''}`)

beforeEach(async () => {
  dir = mkdtempSync(join(tmpdir(), 'pay-'))
  nowMs = Date.now()
  heard = null
  pay = await start()
})
afterEach(async () => {
  await pay.close()
  await new Promise<void>(resolve => heard ? heard.close(() => resolve()) : resolve())
  rmSync(dir, { recursive: true, force: true })
})

/** Somebody who is told of events; `answers` are the statuses given, 200 after them. */
async function listener(answers: number[] = []): Promise<{ url: string, got: { type: string, id: string, body: string, signature: string }[] }> {
  const got: { type: string, id: string, body: string, signature: string }[] = []
  heard = createServer(async (request, response) => {
    const body = await text(request)
    const event = JSON.parse(body) as Stripe.Event
    got.push({ type: event.type, id: event.id, body, signature: String(request.headers['stripe-signature']) })
    response.writeHead(answers.shift() ?? 200).end()
  })
  await new Promise<void>(resolve => heard?.listen(0, '127.0.0.1', resolve))
  return { url: `http://127.0.0.1:${(heard.address() as AddressInfo).port}/hook`, got }
}

describe('a checkout session', () => {
  it('is paid once, however often the button is pressed, and sends the payer back', async () => {
    const made = await session()
    expect(made).toMatchObject({ status: 'open', payment_status: 'unpaid', amount_total: 35_000, payment_intent: null, client_reference_id: 'ours' })
    const pressed = await press(made.url, 'pay')
    expect([pressed.status, pressed.headers.get('location')]).toEqual([303, `http://127.0.0.1:3000/done?s=${made.id}`])
    await press(made.url, 'pay')
    const paid = await client().checkout.sessions.retrieve(made.id)
    expect(paid).toMatchObject({ status: 'complete', payment_status: 'paid', url: null })
    const charges = await client().charges.list({ payment_intent: String(paid.payment_intent) })
    expect(charges.data.map(one => [one.amount, one.paid, one.metadata.payment])).toEqual([[35_000, true, 'ours']])
    expect(await client().paymentIntents.retrieve(String(paid.payment_intent))).toMatchObject({ status: 'succeeded', latest_charge: charges.data[0]?.id })
    expect((await client().checkout.sessions.listLineItems(made.id)).data.map(one => one.description)).toEqual(['Deposit <b>'])
  })
  it('stays open when the card is declined, and says so on the page', async () => {
    const made = await session()
    expect(await (await press(made.url, 'declined')).text()).toContain('Your card was declined.')
    expect(await (await press(made.url, 'insufficient')).text()).toContain('insufficient funds')
    const open = await client().checkout.sessions.retrieve(made.id)
    expect(open).toMatchObject({ status: 'open', payment_status: 'unpaid' })
    await press(made.url, 'pay')
    const charges = await client().charges.list({ payment_intent: String(open.payment_intent) })
    expect(charges.data.map(one => one.failure_code ?? 'paid')).toEqual(['paid', 'card_declined', 'card_declined'])
  })
  it('expires by its time, by the button, or when told, and is not paid after', async () => {
    const [byTime, byButton, byCall] = [await session({ expires_at: seconds() + 1800 }), await session(), await session()]
    nowMs += 1_801_000
    await press(byButton?.url ?? '', 'expire')
    await client().checkout.sessions.expire(byCall?.id ?? '')
    for (const made of [byTime, byButton, byCall]) {
      await press(made?.url ?? '', 'pay')
      expect(await client().checkout.sessions.retrieve(made?.id ?? '')).toMatchObject({ status: 'expired', payment_status: 'unpaid' })
    }
    expect((await client().charges.list()).data).toEqual([])
    expect(await failure(client().checkout.sessions.expire(byTime?.id ?? ''))).toBe('400 invalid_request_error')
  })
  it('is refused when it would last too short or too long, cost nothing, or say what is not known', async () => {
    expect(await failure(session({ expires_at: seconds() + 29 * 60 }))).toBe('400 invalid_request_error')
    expect(await failure(session({ expires_at: seconds() + 25 * 3600 }))).toBe('400 invalid_request_error')
    expect(await failure(session({ line_items: [{ quantity: 1, price_data: { currency: 'gbp', unit_amount: 3, product_data: { name: 'x' } } }] }))).toBe('400 invalid_request_error amount_too_small')
    expect(await failure(session({ line_items: [{ quantity: 1, price_data: { currency: 'gbp', unit_amount: 3.5, product_data: { name: 'x' } } }] }))).toBe('400 invalid_request_error parameter_invalid_integer')
    expect(await failure(session({ customer_email: 'nobody' }))).toBe('400 invalid_request_error email_invalid')
    expect(await failure(session({ locale: 'en' }))).toBe('400 invalid_request_error parameter_unknown')
    expect(await failure(client().checkout.sessions.retrieve('cs_test_none'))).toBe('404 invalid_request_error resource_missing')
    expect(await failure(client().customers.create({}))).toBe('404 invalid_request_error')
  })
  it('does not carry what it was given into its page as markup', async () => {
    const page = await (await fetch((await session()).url ?? '')).text()
    expect(page).toContain('Deposit &#60;b&#62;')
    expect(page).not.toContain('Deposit <b>')
  })
})

describe('a refund', () => {
  async function charge() {
    const made = await session()
    await press(made.url, 'pay')
    return (await client().charges.list()).data[0]?.id ?? ''
  }
  it('goes in parts, and never over what is left of the charge', async () => {
    const id = await charge()
    await client().refunds.create({ charge: id, amount: 10_000, metadata: { refund: 'r1' } })
    expect(await failure(client().refunds.create({ charge: id, amount: 25_001 }))).toBe('400 invalid_request_error')
    const { payment_intent: intent } = await client().charges.retrieve(id)
    await client().refunds.create({ payment_intent: String(intent) })
    expect(await failure(client().refunds.create({ charge: id, amount: 1 }))).toBe('400 invalid_request_error charge_already_refunded')
    expect(await client().charges.retrieve(id)).toMatchObject({ amount_refunded: 35_000, refunded: true })
    const list = await client().refunds.list({ charge: id })
    expect(list.data.map(one => [one.amount, one.metadata?.refund ?? null])).toEqual([[25_000, null], [10_000, 'r1']])
    expect((await client().refunds.retrieve(list.data[0]?.id ?? '')).status).toBe('succeeded')
  })
  it('of a declined charge is refused', async () => {
    const made = await session()
    await press(made.url, 'declined')
    expect(await failure(client().refunds.create({ charge: (await client().charges.list()).data[0]?.id ?? '', amount: 100 }))).toBe('400 invalid_request_error')
  })
})

describe('the API', () => {
  it('gives the first answer to a key again, and refuses the key for anything else', async () => {
    const first = await session({}, 'key-1')
    const again = await session({}, 'key-1')
    expect(again.id).toBe(first.id)
    expect(again.lastResponse.headers['idempotent-replayed']).toBe('true')
    expect(await failure(session({ customer_email: 'other@sallowbeck.example' }, 'key-1'))).toBe('400 idempotency_error')
    expect((await client().checkout.sessions.list()).data).toHaveLength(1)
  })
  it('wants the secret key and its own version', async () => {
    expect(await failure(client('sk_test_wrong').charges.list())).toBe('401 invalid_request_error')
    expect((await fetch(`${pay.url}/v1/charges`, { headers: { 'authorization': `Bearer ${key}`, 'stripe-version': '2020-01-01' } })).status).toBe(400)
    expect((await fetch(`${pay.url}/v1/refunds`, { method: 'POST', headers: { 'authorization': `Bearer ${key}`, 'stripe-version': '2026-10-28.endive', 'content-type': 'application/json' }, body: '{}' })).status).toBe(400)
  })
  it('lists in pages, newest first, each thing once', async () => {
    const made: string[] = []
    for (let n = 0; n < 5; n += 1) made.push((await session()).id)
    const first = await client().checkout.sessions.list({ limit: 2 })
    expect([first.data.map(one => one.id), first.has_more]).toEqual([[made[4], made[3]], true])
    const last = await client().checkout.sessions.list({ limit: 3, starting_after: made[3] })
    expect([last.data.map(one => one.id), last.has_more]).toEqual([[made[2], made[1], made[0]], false])
    expect((await client().checkout.sessions.list({ created: { gte: seconds() + 1 } })).data).toEqual([])
  })
  it('can be busy, broken or slow, and do the work while the answer is lost', async () => {
    Object.assign(pay.faults, { api429Next: 1, api500Next: 1 })
    expect(await failure(session())).toBe('429 invalid_request_error rate_limit')
    expect(await failure(session())).toBe('500 api_error')
    pay.faults.responseLostNext = 1
    // The SDK's own second try, with the key it made, gets the answer that was lost.
    expect((await client(key, 1).checkout.sessions.create(order())).status).toBe('open')
    expect((await client().checkout.sessions.list()).data).toHaveLength(1)
  })
  it('reads a form with brackets, and refuses names that reach where they should not', () => {
    expect(readForm('a[0][b]=1&a[1][b]=2&c[d]=x&e=y')).toEqual({ a: [{ b: '1' }, { b: '2' }], c: { d: 'x' }, e: 'y' })
    expect(readForm('types[]=a&types[]=b')).toEqual({ types: ['a', 'b'] })
    expect(() => readForm('__proto__[x]=1')).toThrow(/Invalid parameter name/)
  })
})

describe('messages', () => {
  const types = ['charge.succeeded', 'checkout.session.completed', 'payment_intent.succeeded']
  async function paidWith(url: string) {
    pay.tell(url)
    await press((await session()).url, 'pay')
  }
  it('are signed over their bytes and time, and stand in the list of events', async () => {
    const { url, got } = await listener()
    await paidWith(url)
    expect(await waitUntil(() => got.length === 3, 3000)).toBe(true)
    expect(got.map(one => one.type).sort()).toEqual(types)
    for (const { body, signature } of got) {
      // "t=<seconds>,v1=<hex of HMAC-SHA256 over seconds.body>": the processor's documented scheme, reckoned here on its own.
      const [, t, v1] = /^t=(\d+),v1=([0-9a-f]{64})$/.exec(signature) ?? []
      expect(v1).toBe(createHmac('sha256', webhookSecret).update(`${t}.${body}`).digest('hex'))
    }
    expect((await client().events.list()).data.map(one => one.id).sort()).toEqual(got.map(one => one.id).sort())
  })
  it('are sent again until they are taken', async () => {
    const { url, got } = await listener([500, 503, 500])
    await paidWith(url)
    expect(await waitUntil(() => got.length === 6, 6000)).toBe(true)
    expect(new Set(got.map(one => one.id)).size).toBe(3)
  })
  it('can be lost, come twice, late, and in the wrong order', async () => {
    const { url, got } = await listener()
    pay.faults.webhooksLost = 3
    await paidWith(url)
    pay.faults.webhooksTwice = 3
    await paidWith(url)
    expect(await waitUntil(() => got.length >= 6, 3000)).toBe(true)
    expect(new Set(got.map(one => one.id)).size).toBe(3)
    got.length = 0
    pay.faults.webhooksReversed = 3
    await paidWith(url)
    expect(await waitUntil(() => got.length === 3, 3000)).toBe(true)
    expect(got.map(one => one.type)).toEqual(['checkout.session.completed', 'payment_intent.succeeded', 'charge.succeeded'])
    Object.assign(pay.faults, { webhooksLate: 3, lateMs: 500 })
    const began = performance.now()
    await paidWith(url)
    // By their ids: a message whose answer was lost comes once more, which is no fault of the ones that are late.
    expect(await waitUntil(() => new Set(got.map(one => one.id)).size === 6, 3000)).toBe(true)
    expect(performance.now() - began).toBeGreaterThan(450)
  })
  it('are not lost with the process, nor is anything else', async () => {
    const made = await session({}, 'key-kept')
    await press(made.url, 'pay')
    await pay.close()
    // What a kill in the middle of a write leaves.
    appendFileSync(join(dir, 'journal.jsonl'), '[["charges",{"id":"ch_half"')
    const { url, got } = await listener()
    pay = await start(url)
    expect(await waitUntil(() => got.length === 3, 3000)).toBe(true)
    expect((await session({}, 'key-kept')).id).toBe(made.id)
    expect((await client().charges.list()).data.map(one => one.amount)).toEqual([35_000])
    await pay.close()
    pay = await start(url)
    expect(await client().checkout.sessions.retrieve(made.id)).toMatchObject({ status: 'complete' })
    await new Promise(resolve => setTimeout(resolve, 300))
    expect(got).toHaveLength(3)
  })
})
