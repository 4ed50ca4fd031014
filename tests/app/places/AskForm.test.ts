import { mountSuspended } from '@nuxt/test-utils/runtime'
import { flushPromises } from '@vue/test-utils'
import { describe, expect, it, vi } from 'vitest'
import type { Failure } from '#shared/contract/failure'
import AskForm from '~/components/places/AskForm.vue'
import { offer } from './samples'

const form = async (more: Record<string, unknown> = {}) => {
  const ask = vi.fn(async (): Promise<Failure | null> => null)
  const wrapper = await mountSuspended(AskForm, { props: { cohort: offer(), ask, failure: null, answer: null, ...more } })
  return { wrapper, ask }
}
const settle = async () => {
  await flushPromises()
  await new Promise(done => setTimeout(done, 20))
  await flushPromises()
}

describe('AskForm', () => {
  it('sends nothing until name and address can be used, and says what to mend', async () => {
    const { wrapper, ask } = await form()
    await wrapper.get('input[name=email]').setValue('orla@')
    await wrapper.get('form').trigger('submit')
    await settle()
    expect(ask).not.toHaveBeenCalled()
    expect(wrapper.text()).toContain('Finish the address')
    expect(wrapper.text()).toContain('Write the name')
  })
  it('sends what was typed, tidied as the server tidies it', async () => {
    const { wrapper, ask } = await form()
    await wrapper.get('input[name=name]').setValue('  Orla Fenwick ')
    await wrapper.get('input[name=email]').setValue('Orla@Post.example')
    await wrapper.get('form').trigger('submit')
    await settle()
    expect(ask).toHaveBeenCalledWith({ name: 'Orla Fenwick', email: 'orla@post.example', note: '' })
  })
  it('promises nothing before the link is opened', async () => {
    const { wrapper } = await form({ answer: { sentTo: 'orla@post.example', freeNow: true } })
    expect(wrapper.text()).toContain('Nothing is held yet.')
    expect(wrapper.find('form').exists()).toBe(false)
  })
  it('speaks of a turn on the list when no place is free', async () => {
    const { wrapper } = await form({ cohort: offer({ placesLeft: 0, waiting: 2 }) })
    expect(wrapper.text()).toContain('Ask for a turn on the list')
  })
  it('takes no ask for a cohort that is not open', async () => {
    const { wrapper } = await form({ cohort: offer({ open: false }) })
    expect(wrapper.find('form').exists()).toBe(false)
    expect(wrapper.text()).toContain('Not open yet')
  })
  it('shows why the server refused', async () => {
    const { wrapper } = await form({ failure: { code: 'too_many_asks', sentence: 'Too many asks from here. Wait an hour.', status: 429, issues: [], extra: {} } })
    expect(wrapper.get('[role=alert]').text()).toContain('Wait an hour')
  })
})
