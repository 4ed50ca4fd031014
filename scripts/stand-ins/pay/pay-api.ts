import { PayError } from './pay-error'
import type { Change, Charge, Intent, LineItem, PayStore, Refund, Session } from './pay-store'
import type { Processor } from './processor'
import type { Form, FormValue } from './read-form'

export type ApiAnswer = { status: number, body: unknown, changes: Change[], happened: [string, Session | Intent | Charge | Refund][] }

const leastMinutes = 30
const mostHours = 24
/** The processor takes no card payment below this; in minor units of each of the three currencies it is about the same. */
const leastMinor = 30

const wrong = (message: string, param?: string, code?: string) => new PayError(400, 'invalid_request_error', message, { ...(code ? { code } : {}), ...(param ? { param } : {}) })
const answer = (body: unknown, changes: Change[] = [], happened: ApiAnswer['happened'] = []): ApiAnswer => ({ status: 200, body, changes, happened })

/** The part of the processor's API that the school uses. What it does not know it refuses rather than guess. */
export class PayApi {
  constructor(private readonly store: PayStore, private readonly processor: Processor, private readonly pageUrl: () => string) {}

  /** @throws {PayError} */
  answer(method: string, path: string, form: Form): ApiAnswer {
    const [, resource = '', ...rest] = path.replace(/^\/v1\/checkout\//, '/v1/checkout_').split('/').slice(1)
    const [id, action] = rest
    const key = `${method} ${resource}${id === undefined ? '' : '/:id'}${action === undefined ? '' : `/${action}`}`
    switch (rest.length > 2 ? '' : key) {
      case 'POST checkout_sessions': return this.startSession(form)
      case 'GET checkout_sessions': {
        this.processor.tick()
        only(form, ['created', 'payment_intent', 'status', ...paging])
        return this.list('/v1/checkout/sessions', this.store.all('sessions').filter(one => matches(form, 'payment_intent', one.payment_intent) && matches(form, 'status', one.status)), form)
      }
      case 'GET checkout_sessions/:id': return answer(this.session(id))
      case 'GET checkout_sessions/:id/line_items': {
        only(form, paging)
        return this.list(`/v1/checkout/sessions/${id}/line_items`, (this.store.get('insides', this.session(id).id)?.items ?? []).map(item => ({ ...item, created: 0 })), form)
      }
      case 'POST checkout_sessions/:id/expire': {
        const session = this.session(id)
        only(form, [])
        if (session.status !== 'open') throw wrong(`Only Checkout Sessions with a status in ["open"] can be expired. This Checkout Session has a status of ${session.status}.`)
        const expired: Session = { ...session, status: 'expired', url: null }
        return answer(expired, [['sessions', expired]], [['checkout.session.expired', expired]])
      }
      case 'GET payment_intents/:id': return answer(this.find('intents', id, 'payment_intent'))
      case 'GET charges': {
        only(form, ['created', 'payment_intent', ...paging])
        return this.list('/v1/charges', this.store.all('charges').filter(one => matches(form, 'payment_intent', one.payment_intent)), form)
      }
      case 'GET charges/:id': return answer(this.find('charges', id, 'charge'))
      case 'POST refunds': return this.startRefund(form)
      case 'GET refunds': {
        only(form, ['charge', 'created', 'payment_intent', ...paging])
        return this.list('/v1/refunds', this.store.all('refunds').filter(one => matches(form, 'payment_intent', one.payment_intent) && matches(form, 'charge', one.charge)), form)
      }
      case 'GET refunds/:id': return answer(this.find('refunds', id, 'refund'))
      case 'GET events': {
        only(form, ['created', 'type', 'types', ...paging])
        const types = Array.isArray(form.types) ? form.types : null
        return this.list('/v1/events', this.store.all('events').filter(one => matches(form, 'type', one.type) && (types === null || types.includes(one.type))), form)
      }
      case 'GET events/:id': return answer(this.find('events', id, 'event'))
      default: throw new PayError(404, 'invalid_request_error', `Unrecognized request URL (${method}: ${path}). This stand-in does not know it.`)
    }
  }

  private session(id = ''): Session {
    const session = this.processor.session(id)
    if (!session) throw missing('checkout.session', id)
    return session
  }

  private find<Kind extends 'intents' | 'charges' | 'refunds' | 'events'>(kind: Kind, id = '', name: string) {
    const found = this.store.get(kind, id)
    if (!found) throw missing(name, id)
    return found
  }

  private startSession(form: Form): ApiAnswer {
    only(form, ['mode', 'client_reference_id', 'line_items', 'customer_email', 'success_url', 'cancel_url', 'expires_at', 'metadata', 'payment_intent_data'])
    if (text(form, 'mode') !== 'payment') throw wrong('This stand-in knows mode=payment alone.', 'mode')
    const lines = form.line_items
    if (!Array.isArray(lines) || lines.length === 0) throw wrong('You must pass at least one line item.', 'line_items')
    const items = lines.map((line, index) => this.lineItem(line, index))
    const [first] = items
    const currency = first?.currency ?? ''
    if (items.some(item => item.currency !== currency)) throw wrong('All line items must have the same currency.', 'line_items')
    const total = items.reduce((sum, item) => sum + item.amount_total, 0)
    if (total < leastMinor) throw wrong(`The Checkout Session's total amount must be at least ${leastMinor} minor units.`, undefined, 'amount_too_small')
    const success = address(form, 'success_url')
    if (success === null) throw wrong('Missing required param: success_url.', 'success_url', 'parameter_missing')
    const email = optional(form, 'customer_email')
    if (email !== null && !/^[^\s@]+@[^\s@]+$/.test(email)) throw wrong(`Invalid email address: ${email}`, 'customer_email', 'email_invalid')
    const created = this.processor.seconds()
    const expires = form.expires_at === undefined ? created + mostHours * 3600 : whole(form.expires_at, 'expires_at')
    // Seconds are counted down to whole ones on both sides.
    if (expires < created + leastMinutes * 60 - 1) throw wrong('The `expires_at` timestamp must be at least 30 minutes from Checkout Session creation.', 'expires_at')
    if (expires > created + mostHours * 3600) throw wrong('The `expires_at` timestamp must be less than 24 hours from Checkout Session creation.', 'expires_at')
    const inside = form.payment_intent_data === undefined ? {} : members(form.payment_intent_data, 'payment_intent_data')
    only(inside, ['metadata'], 'payment_intent_data')

    const id = this.processor.id('cs')
    const session: Session = {
      id, object: 'checkout.session', amount_subtotal: total, amount_total: total, cancel_url: address(form, 'cancel_url'), client_reference_id: optional(form, 'client_reference_id'),
      created, currency, customer: null, customer_email: email, expires_at: expires, livemode: false, metadata: texts(form.metadata, 'metadata'),
      mode: 'payment', payment_intent: null, payment_method_types: ['card'], payment_status: 'unpaid', status: 'open', success_url: success, url: `${this.pageUrl()}/pay/${id}`,
    }
    return answer(session, [['sessions', session], ['insides', { id, items, intentMetadata: texts(inside.metadata, 'payment_intent_data[metadata]') }]])
  }

  private lineItem(line: FormValue, index: number): LineItem {
    const at = `line_items[${index}]`
    const item = members(line, at)
    only(item, ['quantity', 'price_data'], at)
    const price = members(item.price_data ?? '', `${at}[price_data]`)
    only(price, ['currency', 'unit_amount', 'product_data'], `${at}[price_data]`)
    const product = members(price.product_data ?? '', `${at}[price_data][product_data]`)
    only(product, ['name'], `${at}[price_data][product_data]`)
    const currency = text(price, 'currency')
    if (!/^[a-z]{3}$/.test(currency)) throw wrong(`Invalid currency: ${currency}`, `${at}[price_data][currency]`)
    const quantity = whole(item.quantity ?? '1', `${at}[quantity]`)
    const amount = quantity * whole(price.unit_amount ?? '', `${at}[price_data][unit_amount]`)
    return { id: this.processor.id('li'), object: 'item', amount_subtotal: amount, amount_total: amount, currency, description: text(product, 'name'), quantity }
  }

  private startRefund(form: Form): ApiAnswer {
    only(form, ['amount', 'charge', 'payment_intent', 'metadata', 'reason'])
    const intentId = optional(form, 'payment_intent')
    const chargeId = optional(form, 'charge') ?? (intentId === null ? null : this.find('intents', intentId, 'payment_intent').latest_charge)
    if (chargeId === null) throw wrong('One of the following params should be provided for this request: payment_intent or charge.')
    const charge = this.find('charges', chargeId, 'charge')
    const amount = form.amount === undefined ? charge.amount - charge.amount_refunded : whole(form.amount, 'amount')
    const { refund, changes, happened } = this.processor.refund(charge, amount, { metadata: texts(form.metadata, 'metadata'), reason: optional(form, 'reason') })
    return answer(refund, changes, happened)
  }

  /** A page of a list, newest first. */
  private list(url: string, items: { id: string, created: number }[], form: Form): ApiAnswer {
    const limit = form.limit === undefined ? 10 : whole(form.limit, 'limit')
    if (limit < 1 || limit > 100) throw wrong('Invalid limit: must be between 1 and 100', 'limit')
    const range = form.created === undefined ? {} : typeof form.created === 'string' ? { gte: form.created, lte: form.created } : members(form.created, 'created')
    only(range, ['gt', 'gte', 'lt', 'lte'], 'created')
    const bound = (name: string) => range[name] === undefined ? null : whole(range[name], `created[${name}]`)
    const [gt, gte, lt, lte] = [bound('gt'), bound('gte'), bound('lt'), bound('lte')]
    const newest = items.filter(({ created }) => (gt === null || created > gt) && (gte === null || created >= gte) && (lt === null || created < lt) && (lte === null || created <= lte)).reverse()
    const place = (name: string) => {
      const id = optional(form, name)
      if (id === null) return null
      const index = newest.findIndex(item => item.id === id)
      if (index < 0) throw wrong(`No such object: '${id}'`, name, 'resource_missing')
      return index
    }
    const after = place('starting_after')
    const before = place('ending_before')
    if (after !== null && before !== null) throw wrong('You cannot parameterize both `starting_after` and `ending_before`.')
    const rest = before !== null ? newest.slice(0, before) : newest.slice(after === null ? 0 : after + 1)
    const data = before !== null ? rest.slice(-limit) : rest.slice(0, limit)
    return answer({ object: 'list', url, has_more: data.length < rest.length, data })
  }
}

const paging = ['limit', 'starting_after', 'ending_before']
const missing = (name: string, id: string) => new PayError(404, 'invalid_request_error', `No such ${name}: '${id}'`, { code: 'resource_missing', param: 'id' })
const matches = (form: Form, name: string, value: string | null) => form[name] === undefined || form[name] === value

function only(form: { [name: string]: FormValue }, known: readonly string[], at?: string): void {
  for (const name of Object.keys(form)) {
    const param = at === undefined ? name : `${at}[${name}]`
    if (!known.includes(name)) throw wrong(`Received unknown parameter: ${param}`, param, 'parameter_unknown')
  }
}

function text(form: { [name: string]: FormValue }, name: string): string {
  const value = form[name]
  if (typeof value !== 'string' || value === '') throw wrong(`Missing required param: ${name}.`, name, 'parameter_missing')
  return value
}

const optional = (form: Form, name: string): string | null => form[name] === undefined ? null : text(form, name)

function address(form: Form, name: string): string | null {
  const value = optional(form, name)
  if (value !== null && (!URL.canParse(value.replaceAll(/[{}]/g, '')) || !/^https?:/.test(value))) throw wrong(`Not a valid URL: ${value}`, name, 'url_invalid')
  return value
}

function whole(value: FormValue, param: string): number {
  if (typeof value !== 'string' || !/^\d{1,12}$/.test(value)) throw wrong(`Invalid integer: ${typeof value === 'string' ? value : '(not one value)'}`, param, 'parameter_invalid_integer')
  return Number(value)
}

function members(value: FormValue, param: string): { [name: string]: FormValue } {
  if (typeof value === 'string' || Array.isArray(value)) throw wrong(`Invalid object: ${param}`, param)
  return value
}

function texts(value: FormValue | undefined, param: string): Record<string, string> {
  if (value === undefined) return {}
  const given = members(value, param)
  for (const [name, member] of Object.entries(given)) if (typeof member !== 'string' || name.length > 40 || member.length > 500) throw wrong(`Metadata values can be text of up to 500 characters.`, `${param}[${name}]`)
  return given as Record<string, string>
}
