import { mountSuspended } from '@nuxt/test-utils/runtime'
import { describe, expect, it } from 'vitest'
import MetalLeft from '~/components/rubric/MetalLeft.vue'

describe('MetalLeft', () => {
  it('gives the figure only together with where to stop', async () => {
    // Handbook 3.1: 4.40 read, U 0.15, accept 3.5, hand 0.15: 0.6 mm, stop at 3.5.
    const metal = await mountSuspended(MetalLeft, { props: { takeMm: 0.6, stopAtMm: 3.5, chanceUnderHardLeast: 0.00001, where: 'pushrod wall, cylinder 2 intake', expandedUncertainty: 0.15, handAllowanceMm: 0.15 } })
    expect(metal.text()).toContain('0.6mm')
    expect(metal.text()).toContain('Stop at 3.5 mm (0.138 in)')
    expect(metal.text()).toContain('under 0.01 %')
  })
  it('gives no figure to take where the chance of a thin wall is too great', async () => {
    const metal = await mountSuspended(MetalLeft, { props: { takeMm: null, stopAtMm: 3.5, chanceUnderHardLeast: 0.12, where: 'pushrod wall' } })
    expect(metal.text()).toContain('Stop; show the map')
    expect(metal.text()).toContain('the metal may be worse')
    expect(metal.text()).not.toMatch(/may take/)
  })
})
