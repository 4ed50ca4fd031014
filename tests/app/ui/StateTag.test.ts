import { mountSuspended } from '@nuxt/test-utils/runtime'
import { describe, expect, it } from 'vitest'
import type { CriterionState } from '#shared/domain/rubric/criterion'
import StateTag from '~/components/ui/StateTag.vue'

const states: [CriterionState, string][] = [['accept', 'Accept'], ['borderline', 'Borderline'], ['reject', 'Reject'], ['not-assessed', 'Not assessed'], ['does-not-apply', 'Does not apply']]

describe('StateTag', () => {
  it.each(states)('writes %s as "%s"', async (state, word) => {
    expect((await mountSuspended(StateTag, { props: { state } })).text()).toBe(word)
  })
  it('gives every state a shape and a look of its own', async () => {
    const tags = await Promise.all(states.map(([state]) => mountSuspended(StateTag, { props: { state } })))
    expect(new Set(tags.map(tag => tag.get('svg').element.innerHTML)).size).toBe(5)
    expect(new Set(tags.map(tag => tag.attributes('class'))).size).toBe(5)
    expect(tags.every(tag => tag.get('svg').attributes('aria-hidden') === 'true')).toBe(true)
  })
})
