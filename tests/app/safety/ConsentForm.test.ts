import { mountSuspended } from '@nuxt/test-utils/runtime'
import { describe, expect, it } from 'vitest'
import ConsentForm from '~/components/safety/ConsentForm.vue'
import SharingChoices from '~/components/safety/SharingChoices.vue'
import type { ConsentView } from '#shared/contract/safety'

const view: ConsentView = {
  version: 2, state: 'asked again', signed: { version: 1, at: '2026-02-10T18:05:00Z', as: 'Imre Tallowin', guardian: null }, changed: ['noise'], firstAid: '', bootSize: '9', clearances: [],
  clauses: [{ code: 'noise', title: 'Noise and shaking hands', text: 'I wear ears.' }, { code: 'stop', title: 'Stop means stop', text: 'Anyone may call it.' }],
  choices: [{ code: 'sponsor-result', text: 'Tell my sponsor my result.', allowed: true }],
}
const mounted = () => mountSuspended(ConsentForm, { props: { form: view, busy: false, name: 'Imre Tallowin' } })
type Mounted = Awaited<ReturnType<typeof mounted>>
const tick = (wrapper: Mounted, code: string) => wrapper.get(`input[value="${code}"]`).setValue(true)

describe('the safety form', () => {
  it('marks what changed, has nothing ticked beforehand, and says what still wants a tick', async () => {
    const wrapper = await mounted()
    expect(wrapper.findAll('li').map(one => one.text().includes('changed'))).toEqual([true, false])
    expect(wrapper.findAll<HTMLInputElement>('ol input').map(one => one.element.checked)).toEqual([false, false])
    await tick(wrapper, 'noise')
    await wrapper.get('form').trigger('submit')
    expect(wrapper.get('[role="alert"]').text()).toBe('One point still wants its tick: Stop means stop.')
    expect(wrapper.emitted('sign')).toBeUndefined()
  })
  it('sends every tick with the name, once all are set', async () => {
    const wrapper = await mounted()
    await tick(wrapper, 'noise')
    await tick(wrapper, 'stop')
    await wrapper.get('form').trigger('submit')
    expect(wrapper.emitted('sign')).toEqual([[{ ticks: ['noise', 'stop'], signedAs: 'Imre Tallowin', under18: false, guardian: '', firstAid: '', bootSize: '9' }]])
  })
  it('wants the guardian\'s name of somebody under 18', async () => {
    const wrapper = await mounted()
    await tick(wrapper, 'noise')
    await tick(wrapper, 'stop')
    const [under18] = wrapper.findAll('input[type="checkbox"]').slice(-1)
    await under18!.setValue(true)
    await wrapper.get('form').trigger('submit')
    expect(wrapper.emitted('sign')).toBeUndefined()
    expect(wrapper.text()).toContain('Under 18 a guardian signs too')
  })
  it('clears the ticks when another version comes in', async () => {
    const wrapper = await mounted()
    await tick(wrapper, 'noise')
    await wrapper.setProps({ form: { ...view, version: 3 } })
    expect(wrapper.findAll<HTMLInputElement>('ol input').map(one => one.element.checked)).toEqual([false, false])
  })
})

it('asks for the other answer when a sharing box is pressed, and moves only when the server has said so', async () => {
  const wrapper = await mountSuspended(SharingChoices, { props: { choices: view.choices, busy: null } })
  await wrapper.get('input').trigger('click')
  expect(wrapper.emitted('choose')).toEqual([['sponsor-result', false]])
  expect(wrapper.text()).toContain('allowed')
})
