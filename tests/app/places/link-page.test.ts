import { mountSuspended, registerEndpoint } from '@nuxt/test-utils/runtime'
import { flushPromises, type VueWrapper } from '@vue/test-utils'
import { setResponseStatus, type H3Event } from 'h3'
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import type { PlaceLinkView } from '#shared/contract/places'
import PlacePage from '~/pages/place/[token].vue'
import { linkView } from './samples'

// Each test has a link of its own: what was read for one must not answer for another.
let count = 0
let wrapper: VueWrapper | null = null
const calls: string[] = []

function problem(event: H3Event, status: number, code: string, title: string) {
  setResponseStatus(event, status)
  return { code, title, status }
}
/** What the school finds when it asks the card service itself. */
let asksTheCardService: () => void = () => {}
registerEndpoint('/api/payments/returned', { method: 'POST', handler: () => {
  asksTheCardService()
  return { underWay: true }
} })
/** A server of one link: `view` answers the look; open, pass and pay as the test says. */
function serve(view: (event: H3Event) => unknown, more: { open?: () => PlaceLinkView, pass?: () => PlaceLinkView, pay?: (event: H3Event) => unknown } = {}) {
  const token = `token-of-a-place-${++count}`
  const path = `/api/place-links/${token}`
  registerEndpoint(path, (event) => {
    calls.push('look')
    return view(event)
  })
  for (const what of ['open', 'pass', 'pay'] as const) {
    registerEndpoint(`${path}/${what}`, { method: 'POST', handler: (event) => {
      calls.push(what)
      return more[what]?.(event) ?? problem(event, 500, 'fault', 'Not expected by this test.')
    } })
  }
  return token
}
async function page(token: string, query = '') {
  wrapper = await mountSuspended(PlacePage, { route: `/place/${token}${query}` })
  await settle()
  return wrapper
}
async function settle() {
  for (let turn = 0; turn < 6; turn++) {
    await flushPromises()
    await new Promise(done => setTimeout(done, 5))
  }
}
const button = (words: string) => wrapper!.findAll('button').find(one => one.text().startsWith(words))!
beforeEach(() => calls.splice(0))
afterEach(() => {
  wrapper?.unmount()
  wrapper = null
  asksTheCardService = () => {}
  vi.restoreAllMocks()
  vi.useRealTimers()
})

describe('the page of a mailed link', () => {
  it('looks without holding anything, then opens by script, once', async () => {
    await page(serve(() => linkView({ state: 'asked', doing: 'open', heldUntil: null }), { open: () => linkView() }))
    expect(calls).toEqual(['look', 'open'])
    expect(wrapper!.text()).toContain('30 minutes left')
    expect(wrapper!.text()).toContain('yours until 26 Mar, 20:10')
  })
  it('opens nothing that is opened already', async () => {
    await page(serve(() => linkView()))
    expect(calls).toEqual(['look'])
    expect(button('Pay £350.00 deposit').exists()).toBe(true)
  })
  it('counts by the school’s clock, whatever day the phone shows', async () => {
    await page(serve(() => linkView({ heldUntil: '2026-03-28T19:39:00.000Z' })))
    expect(wrapper!.text()).toContain('1 day 23 hours left')
  })
  it('goes to the card page, and not twice', async () => {
    const go = vi.spyOn(window.location, 'assign').mockImplementation(() => {})
    await page(serve(() => linkView(), { pay: () => ({ url: 'https://pay.example/c/1' }) }))
    await button('Pay').trigger('click')
    await button('Pay').trigger('click')
    await settle()
    expect(go.mock.calls).toEqual([['https://pay.example/c/1']])
    expect(calls).toEqual(['look', 'pay'])
  })
  it('says why a payment could not begin, and shows how the place stands now', async () => {
    let gone = false
    const token = serve(() => gone ? linkView({ state: 'waiting-list', doing: 'wait', turn: 1, heldUntil: null, due: null }) : linkView(), { pay: (event) => {
      gone = true
      return problem(event, 409, 'place_gone', 'The time ran out and somebody else took the place.')
    } })
    await page(token)
    await button('Pay').trigger('click')
    await settle()
    expect(wrapper!.text()).toContain('The time ran out and somebody else took the place.')
    expect(wrapper!.text()).toContain('You are next')
  })
  it('waits for the card service to say so before it says paid', async () => {
    let told = false
    const token = serve(() => told ? linkView({ state: 'deposit-paid', doing: 'pay-balance', heldUntil: null, paid: { minor: 35_000, currency: 'GBP' }, due: { minor: 210_000, currency: 'GBP' } }) : linkView({ payingSince: '2026-03-26T19:41:00.000Z' }))
    let asked = 0
    // Its message is lost: only being asked makes the school know, and only the second time.
    asksTheCardService = () => {
      told = ++asked === 2
    }
    await page(token, '?paid=1')
    expect(wrapper!.text()).toContain('the card service is telling us')
    expect(wrapper!.text()).not.toContain('Thank you')
    await vi.waitFor(() => expect(wrapper!.text()).toContain('Thank you. £350.00 is paid.'), { timeout: 5000 })
    expect(wrapper!.text()).toContain('Pay £2,100.00 balance')
  })
  it('believes no address that only says paid', async () => {
    await page(serve(() => linkView()), '?paid=1')
    expect(wrapper!.text()).not.toContain('Thank you')
    expect(wrapper!.text()).toContain('Nothing was taken from your card')
    expect(button('Pay £350.00 deposit').exists()).toBe(true)
  })
  it('says after a decline that nothing was taken, and offers to pay again', async () => {
    await page(serve(() => linkView({ payingSince: '2026-03-26T19:41:00.000Z' })), '?declined=1')
    expect(wrapper!.text()).toContain('Nothing was taken from your card')
    expect(button('Go on paying £350.00 deposit').exists()).toBe(true)
  })
  it('lets an offer pass only after asking once more', async () => {
    await page(serve(() => linkView(), { pass: () => linkView({ state: 'waiting-list', doing: 'wait', turn: 2, heldUntil: null, due: null }) }))
    await button('Let it pass').trigger('click')
    expect(calls).toEqual(['look'])
    expect(wrapper!.text()).toContain('You keep your turn')
    await wrapper!.get('dialog form').trigger('submit')
    await settle()
    expect(calls).toEqual(['look', 'pass'])
    expect(wrapper!.text()).toContain('Number 2')
  })
  it('offers to look again once the time has run out', async () => {
    await page(serve(() => linkView({ heldUntil: '2026-03-26T19:39:59.000Z' })))
    expect(wrapper!.text()).toContain('The time for this place has run out')
    expect(wrapper!.findAll('button').some(one => one.text().startsWith('Pay'))).toBe(false)
  })
  it('tells whose link is spent or foreign what to do, in one sentence', async () => {
    await page(serve(event => problem(event, 410, 'link_not_usable', 'This link was used already or has run out. Ask for a new one.')))
    expect(wrapper!.text()).toContain('This link opens no place')
    expect(calls).not.toContain('open')
  })
})
