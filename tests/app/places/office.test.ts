import { mountSuspended, registerEndpoint } from '@nuxt/test-utils/runtime'
import { flushPromises } from '@vue/test-utils'
import { getRequestHeader, readBody, setResponseStatus, type H3Event } from 'h3'
import { defineComponent, h } from 'vue'
import { describe, expect, it, vi } from 'vitest'
import type { Failure } from '#shared/contract/failure'
import type { CohortInput, RosterPreview } from '#shared/contract/places'
import CohortForm from '~/components/places/CohortForm.vue'
import HandRefundDialog from '~/components/places/HandRefundDialog.vue'
import RosterRows from '~/components/places/RosterRows.vue'
import StepButtons from '~/components/places/StepButtons.vue'
import { usePlaceDesk } from '~/composables/usePlaceDesk'
import { usePlaceRoster } from '~/composables/usePlaceRoster'
import { agnesQuote, cohortRow, placeView } from './samples'

/** A composable needs a component to live in. */
async function inside<T>(make: () => T): Promise<T> {
  let made: T | undefined
  await mountSuspended(defineComponent({ setup() {
    made = make()
    return () => h('p')
  } }))
  await flushPromises()
  return made!
}
function problem(event: H3Event, status: number, code: string, title: string) {
  setResponseStatus(event, status)
  return { code, title, status }
}
const settle = async () => {
  await flushPromises()
  await new Promise(done => setTimeout(done, 20))
  await flushPromises()
}

describe('usePlaceDesk', () => {
  it('sends the same key again when the line was cut, and a new one after an answer', async () => {
    const id = '11111111-1111-4111-8111-111111111111'
    const keys: (string | undefined)[] = []
    let refuse = false
    let cut = false
    registerEndpoint(`/api/places/${id}`, () => placeView({ id }))
    registerEndpoint(`/api/places/${id}/refund-quote`, () => agnesQuote())
    registerEndpoint(`/api/places/${id}/steps`, { method: 'POST', handler: (event) => {
      keys.push(getRequestHeader(event, 'idempotency-key'))
      return refuse ? problem(event, 409, 'place_state', 'This place has moved on.') : {}
    } })
    const raw = $fetch.raw as (path: string, options: object) => Promise<unknown>
    const line = vi.spyOn($fetch, 'raw').mockImplementation((async (path: string, options: object) => {
      const answer = await raw(path, options)
      // The server did it; only its answer was lost.
      if (cut) throw new TypeError('network')
      return answer
    }) as never)
    const desk = await inside(() => usePlaceDesk(id))
    const press = () => desk.act('steps', { step: 'here', note: '' })
    cut = true
    expect(await press()).toBe(false)
    expect(desk.refused.value?.code).toBe('offline')
    cut = false
    expect(await press()).toBe(true)
    refuse = true
    expect(await press()).toBe(false)
    expect(desk.refused.value?.sentence).toBe('This place has moved on.')
    refuse = false
    expect(await press()).toBe(true)
    line.mockRestore()
    expect(keys[0]).toMatch(/^[0-9a-f-]{36}$/)
    expect(keys[1]).toBe(keys[0])
    expect(new Set(keys).size).toBe(3)
  })
})

describe('usePlaceRoster', () => {
  const preview = (seen: string, bad = 0): RosterPreview => ({ rows: [{ line: 2, name: 'Orla Fenwick', email: 'orla@post.example', sponsor: '', problems: [] }], good: 1, bad, free: 3, seen })
  it('takes exactly what was shown, and shows it anew when it no longer stands', async () => {
    const path = '/api/cohorts/CIN-26/roster'
    const sent: { csv: string, seen: string }[] = []
    let round = 0
    registerEndpoint(`${path}/preview`, { method: 'POST', handler: () => preview(String(++round).repeat(64)) })
    registerEndpoint(path, { method: 'POST', handler: async (event) => {
      sent.push(await readBody(event))
      return sent.length === 1 ? problem(event, 409, 'roster_changed', 'A place was taken since you looked.') : {}
    } })
    const roster = await inside(() => usePlaceRoster('CIN-26'))
    roster.csv.value = 'name,email\nOrla Fenwick,orla@post.example'
    await roster.show()
    await roster.take()
    expect(roster.refused.value?.code).toBe('roster_changed')
    expect(roster.taken.value).toBeNull()
    expect(roster.preview.value?.seen).toBe('2'.repeat(64))
    await roster.take()
    expect(sent.map(one => one.seen)).toEqual(['1'.repeat(64), '2'.repeat(64)])
    expect(roster.taken.value).toBe(1)
  })
})

describe('RosterRows', () => {
  it('names the line and every reason of a row that cannot be taken', async () => {
    const wrapper = await mountSuspended(RosterRows, { props: { preview: { rows: [{ line: 2, name: 'Orla', email: 'orla@post.example', sponsor: 'Mill Yard', problems: [] }, { line: 3, name: '=1+1', email: 'orla@post.example', sponsor: '', problems: ['begins with =, as a formula does', 'this address stands in line 2'] }], good: 1, bad: 1, free: 4, seen: 'a' } } })
    const rows = wrapper.findAll('tbody tr')
    expect(rows[0]!.text()).toContain('gets a place and an invitation')
    expect(rows[1]!.findAll('li').map(one => one.text())).toEqual(['begins with =, as a formula does', 'this address stands in line 2'])
    expect(rows[1]!.text()).toMatch(/^3/)
  })
})

describe('CohortForm', () => {
  const fill = async (values: Record<string, string>) => {
    const keep = vi.fn(async (_: CohortInput): Promise<Failure | null> => null)
    const wrapper = await mountSuspended(CohortForm, { props: { cohort: cohortRow(), refused: null, keep } })
    for (const [label, value] of Object.entries(values)) {
      const id = wrapper.findAll('label').find(one => one.text().startsWith(label))!.attributes('for')!
      await wrapper.get(`[id="${id}"]`).setValue(value)
    }
    await wrapper.get('form').trigger('submit')
    await settle()
    return { wrapper, keep }
  }
  it('keeps prices to the penny', async () => {
    const { keep } = await fill({ Price: '2,500.29' })
    expect(keep.mock.calls[0]![0]).toMatchObject({ code: 'CIN-26', priceMinor: 250_029, depositMinor: 35_000, places: 8 })
  })
  it('keeps nothing that contradicts itself', async () => {
    const { wrapper, keep } = await fill({ 'Deposit': '2,450.01', 'Last day': '2026-09-20' })
    expect(keep).not.toHaveBeenCalled()
    expect(wrapper.text()).toContain('it cannot be more')
    expect(wrapper.text()).toContain('lies before the first')
  })
  it('says what an amount or a number of places should look like', async () => {
    const { wrapper, keep } = await fill({ 'Price': '1e999', 'Bench places': '8.5' })
    expect(keep).not.toHaveBeenCalled()
    expect(wrapper.text()).toContain('Write pounds and pence: 2450.00')
    expect(wrapper.text()).toContain('A whole number from 1 to 60.')
  })
})

describe('HandRefundDialog', () => {
  it('gives back no more than was paid', async () => {
    const wrapper = await mountSuspended(HandRefundDialog, { props: { open: true, place: placeView(), busy: false, refused: null } })
    const [amount, reason] = wrapper.findAll('input')
    await reason!.setValue('The bench was shut for two evenings.')
    await amount!.setValue('350.01')
    await wrapper.get('form').trigger('submit')
    expect(wrapper.emitted('give')).toBeUndefined()
    expect(wrapper.text()).toContain('more than was paid')
    await amount!.setValue('350')
    await wrapper.get('form').trigger('submit')
    expect(wrapper.emitted('give')).toEqual([[{ amountMinor: 35_000, reason: 'The bench was shut for two evenings.' }]])
  })
})

describe('StepButtons', () => {
  it('offers the steps the server names and no other, and asks before each', async () => {
    const wrapper = await mountSuspended(StepButtons, { props: { place: placeView({ steps: ['withdraw-offer'], state: 'offered' }), busy: false, refused: null } })
    const buttons = wrapper.findAll('button').filter(one => !wrapper.get('dialog').element.contains(one.element))
    expect(buttons.map(one => one.text())).toEqual(['Withdraw the offer'])
    await buttons[0]!.trigger('click')
    expect(wrapper.emitted('step')).toBeUndefined()
    expect(wrapper.get('dialog').text()).toContain('goes to the next person on the list')
    await wrapper.get('dialog form').trigger('submit')
    expect(wrapper.emitted('step')![0]![0]).toEqual({ step: 'withdraw-offer', note: '' })
  })
})
