import { mountSuspended } from '@nuxt/test-utils/runtime'
import { describe, expect, it } from 'vitest'
import NumberPad from '~/components/ui/NumberPad.vue'
import { typeKey } from '~/components/ui/typed-keys'

/** A pad bound as a page binds it: what it emits comes back as its value. */
async function pad(props: Record<string, unknown> = {}) {
  const wrapper = await mountSuspended(NumberPad, { props: { modelValue: '', label: 'Throat, 12-6', unit: 'mm', ...props, 'onUpdate:modelValue': (value: string) => wrapper.setProps({ modelValue: value }) } })
  const press = async (...keys: string[]) => {
    for (const key of keys) await wrapper.get(`[data-key="${key}"]`).trigger('click')
  }
  const type = async (...keys: string[]) => {
    for (const key of keys) await wrapper.get('input').trigger('keydown', { key })
  }
  return { wrapper, press, type, shown: () => wrapper.get('input').element.value }
}

describe('NumberPad', () => {
  it('keeps what is typed exactly as typed, noughts at the end too', async () => {
    const { wrapper, press, shown } = await pad()
    await press('4', '1', '.', '5', '0', 'ok')
    expect(shown()).toBe('41.50')
    expect(wrapper.emitted('ok')).toEqual([['41.50']])
  })
  it('takes one decimal sign only, and rubs out the last figure', async () => {
    const { press, shown } = await pad()
    await press('4', '.', '.', '2', 'back')
    expect(shown()).toBe('4.')
  })
  it('works from a keyboard, and leaves letters out', async () => {
    const { wrapper, type, shown } = await pad({ minus: true })
    await type('-', '0', ',', 'e', '3', 'N', '9', 'Backspace', 'Enter')
    expect(shown()).toBe('-0.3')
    expect(wrapper.emitted('ok')).toEqual([['-0.3']])
  })
  it('has no minus where a quantity cannot be below nought', async () => {
    const { wrapper, type, shown } = await pad()
    expect(wrapper.find('[data-key="-"]').exists()).toBe(false)
    await type('-', '2')
    expect(shown()).toBe('2')
  })
  it('sends nothing while empty or while the last one is on its way', async () => {
    const empty = await pad()
    await empty.type('Enter')
    await empty.press('ok')
    expect(empty.wrapper.emitted('ok')).toBeUndefined()
    const busy = await pad({ modelValue: '4', busy: true })
    await busy.type('Enter')
    await busy.press('ok')
    expect(busy.wrapper.emitted('ok')).toBeUndefined()
  })
  it('keeps the phone’s own keyboard away and names its keys', async () => {
    const { wrapper } = await pad({ minus: true })
    expect(wrapper.get('input').attributes('inputmode')).toBe('none')
    expect(wrapper.get('label').attributes('for')).toBe(wrapper.get('input').attributes('id'))
    expect(wrapper.get('[data-key="back"]').attributes('aria-label')).toBe('Rub out the last figure')
  })
})

describe('typeKey', () => {
  it('puts a nought before a decimal sign that comes first', () => {
    expect(typeKey('', '.', { decimal: ',', minus: false })).toBe('0,')
    expect(typeKey('-', ',', { decimal: ',', minus: true })).toBe('-0,')
  })
  it('changes the sign back and forth', () => {
    expect(typeKey('1.2', '-', { decimal: '.', minus: true })).toBe('-1.2')
    expect(typeKey('-1.2', '-', { decimal: '.', minus: true })).toBe('1.2')
  })
  it('stops at twelve figures', () => {
    expect(typeKey('123456789012', '3', { decimal: '.', minus: false })).toBe('123456789012')
  })
})
