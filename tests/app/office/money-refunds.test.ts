import { mountSuspended } from '@nuxt/test-utils/runtime'
import { describe, expect, it } from 'vitest'
import type { RefundView } from '#shared/contract/money'
import MoneyRefunds from '~/components/office/MoneyRefunds.vue'

const refund = (change: Partial<RefundView> = {}): RefundView => ({
  id: crypto.randomUUID(), place: { id: 'p1', name: 'Callum Thrapp', cohort: 'BRM-25' }, purpose: 'deposit', by: 'card', amount: { minor: 32_500, currency: 'GBP' }, rule: '56-days',
  wording: '56 days or more before the start: deposit back less 25.00; balance all back.', sum: '350.00 paid - 25.00 kept = 325.00 back', state: 'refused', problem: 'The card is closed.', decidedAt: '2026-03-24T10:00:00Z', ...change,
})
const list = (refunds: RefundView[], refused = null) => mountSuspended(MoneyRefunds, { props: { refunds, busy: null, refused } })
const buttons = (wrapper: Awaited<ReturnType<typeof list>>) => wrapper.findAll('li button').map(one => one.text())

describe('MoneyRefunds', () => {
  it('shows rule, sum and the processor\'s words, and offers both ways on', async () => {
    const wrapper = await list([refund()])
    for (const words of ['£325.00', '350.00 paid - 25.00 kept = 325.00 back', '56 days or more before the start', 'The card is closed.', 'refused by the card processor']) expect(wrapper.text()).toContain(words)
    expect(buttons(wrapper)).toEqual(['Send again', 'It went by bank'])
    await wrapper.findAll('li button')[0]!.trigger('click')
    expect(wrapper.emitted('again')?.[0]?.[0]).toMatchObject({ state: 'refused' })
  })
  it('offers nothing for what is on its way to a card, and only the bank for what goes by bank', async () => {
    expect(buttons(await list([refund({ state: 'sent', problem: null }), refund({ state: 'decided', problem: null })]))).toEqual([])
    expect(buttons(await list([refund({ state: 'decided', by: 'bank', problem: null })]))).toEqual(['It went by bank'])
  })
  it('writes a transfer down only with its reference and its day', async () => {
    const wrapper = await list([refund()])
    await wrapper.findAll('li button')[1]!.trigger('click')
    await wrapper.get('dialog form').trigger('submit')
    expect(wrapper.emitted('bank')).toBeUndefined()
    await wrapper.get('dialog input[type=date]').setValue('2026-03-25')
    await wrapper.get('dialog input[maxlength="120"]').setValue('FP 7781')
    await wrapper.get('dialog form').trigger('submit')
    expect(wrapper.emitted('bank')?.[0]?.[1]).toEqual({ reference: 'FP 7781', on: '2026-03-25' })
  })
  it('says so when nothing is under way', async () => {
    expect((await list([])).text()).toContain('No refund is under way')
  })
})
