import { mountSuspended } from '@nuxt/test-utils/runtime'
import { describe, expect, it } from 'vitest'
import GaugeStrip from '~/components/rubric/GaugeStrip.vue'

const wall = { lo: 4, hi: null, loKind: 'no-return', hiKind: 'natural', softLo: 3.5, softHi: 4 }
const land = { lo: 1.52, hi: 1.78, loKind: 'no-return', hiKind: 'put-right', softLo: 1.4, softHi: 1.52 }

describe('GaugeStrip', () => {
  it('says in words what it draws', async () => {
    const strip = await mountSuspended(GaugeStrip, { props: { value: 3.31, expandedUncertainty: 0.15, unit: 'mm', band: wall, state: 'reject', must: true, label: 'Bowl wall, 8 o’clock' } })
    expect(strip.attributes('role')).toBe('img')
    expect(strip.attributes('aria-label')).toBe('Bowl wall, 8 o’clock: 3.31 plus or minus 0.15 mm. Accepted from 4 mm up. As a must it has to clear 4 by its doubt. Reject.')
  })
  it('says so when nothing was read', async () => {
    const strip = await mountSuspended(GaugeStrip, { props: { value: null, unit: 'mm', band: land, state: 'not-assessed' } })
    expect(strip.attributes('aria-label')).toBe('Not read. Accepted from 1.52 to 1.78 mm. Not assessed.')
    expect(strip.find('[data-part="reading"]').exists()).toBe(false)
  })
  it('draws the reading inside the band it lies in, and the hatch from the limit inward', async () => {
    const strip = await mountSuspended(GaugeStrip, { props: { value: 1.62, expandedUncertainty: 0.08, unit: 'mm', band: land, state: 'accept', must: true } })
    const band = strip.get('[data-part="band"]').attributes()
    const [from, length] = [Number(band.x), Number(band.width)]
    // 1.62 is (1.62 - 1.52) / 0.26 of the way along the band; the guard is 0.08 / 0.26 of it.
    expect(Number(strip.get('[data-part="reading"]').attributes('data-x'))).toBeCloseTo(from + length * 0.1 / 0.26, 4)
    const guard = strip.get('[data-part="guarded"]').attributes()
    expect(Number(guard.x)).toBeCloseTo(from, 4)
    expect(Number(guard.width)).toBeCloseTo(length * 0.08 / 0.26, 4)
    expect(guard.fill).toMatch(/^url\(#.+-hatch\)$/)
  })
})
