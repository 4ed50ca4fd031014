import { mountSuspended } from '@nuxt/test-utils/runtime'
import { describe, expect, it } from 'vitest'
import CancelSheet from '~/components/places/CancelSheet.vue'
import { agnesQuote, cohortRow, placeView } from './samples'

const sheet = (more: Record<string, unknown> = {}) => mountSuspended(CancelSheet, { props: { place: placeView(), quote: agnesQuote(), failure: null, refused: null, busy: false, cohorts: [cohortRow(), cohortRow({ code: 'DUN-27', name: 'Dun', taken: 8 }), cohortRow({ code: 'BRM-25', name: 'Bramble' })], cause: 'student' as const, ...more } })
type Sheet = Awaited<ReturnType<typeof sheet>>
const press = async (wrapper: Sheet, words: string) => wrapper.findAll('button').find(one => one.text() === words)!.trigger('click')
const dialog = (wrapper: Sheet, at: number) => wrapper.findAll('dialog')[at]!

describe('CancelSheet', () => {
  it('shows rule and sum before anything can be pressed', async () => {
    const wrapper = await sheet()
    expect(wrapper.text()).toContain('28 to 55 days before the start')
    expect(wrapper.text()).toContain('350.00 paid - 350.00 kept = 0.00 back')
    const lines = wrapper.findAll('dl > div').map(line => [line.get('dt').text(), line.get('dd').text()])
    expect(lines).toEqual([['Deposit paid', '£350.00'], ['Deposit kept or moved', '−£350.00'], ['Back', '£0.00']])
  })
  it('has no button to press while the rule is not known', async () => {
    const wrapper = await sheet({ quote: null })
    expect(wrapper.findAll('button').some(one => one.text() === 'Cancel this place')).toBe(false)
  })
  it('asks once more, names what follows, and sends the sum that was seen', async () => {
    // Handbook 5.4: 56 days or more before the start, deposit back less 25.00, balance all back: 325.00 + 2100.00.
    const wrapper = await sheet({ quote: agnesQuote({ rule: 'days-56-or-more', back: { minor: 242_500, currency: 'GBP' }, deposit: { paid: { minor: 35_000, currency: 'GBP' }, back: { minor: 32_500, currency: 'GBP' } }, balance: { paid: { minor: 210_000, currency: 'GBP' }, back: { minor: 210_000, currency: 'GBP' } } }) })
    await press(wrapper, 'Cancel this place')
    expect(wrapper.emitted('cancel')).toBeUndefined()
    expect(dialog(wrapper, 0).text()).toContain('£2,425.00 goes back')
    expect(dialog(wrapper, 0).text()).toContain('goes to the next person on the list')
    await dialog(wrapper, 0).get('form').trigger('submit')
    expect(wrapper.emitted('cancel')![0]![0]).toEqual({ cause: 'student', seenMinor: 242_500, note: '' })
  })
  it('calls a stop a stop, and asks with its cause', async () => {
    const wrapper = await sheet({ cause: 'unsafe-work', place: placeView({ state: 'here' }), quote: agnesQuote({ mayMove: false }) })
    await press(wrapper, 'Stop this course')
    expect(dialog(wrapper, 0).text()).toContain('after a written warning')
    await dialog(wrapper, 0).get('form').trigger('submit')
    expect(wrapper.emitted('cancel')![0]![0]).toMatchObject({ cause: 'unsafe-work', seenMinor: 0 })
  })
  it('moves only to another cohort with room', async () => {
    const wrapper = await sheet()
    await press(wrapper, 'Move to another cohort')
    const choice = dialog(wrapper, 1).get('select')
    const options = choice.findAll('option').slice(1).map(one => [one.attributes('value'), one.attributes('disabled') !== undefined])
    expect(options).toEqual([['CIN-26', false], ['DUN-27', true]])
    await dialog(wrapper, 1).get('form').trigger('submit')
    expect(wrapper.emitted('move')).toBeUndefined()
    await choice.setValue('CIN-26')
    await dialog(wrapper, 1).get('form').trigger('submit')
    expect(wrapper.emitted('move')![0]![0]).toEqual({ to: 'CIN-26', cause: 'student', note: '' })
  })
  it('offers no second move', async () => {
    const wrapper = await sheet({ quote: agnesQuote({ mayMove: false }), place: placeView({ movedFrom: { cohort: 'Alder', id: 'x' } }) })
    expect(wrapper.findAll('button').some(one => one.text() === 'Move to another cohort')).toBe(false)
    expect(wrapper.text()).toContain('cannot be moved again')
  })
})
