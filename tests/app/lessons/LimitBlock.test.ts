import { mountSuspended } from '@nuxt/test-utils/runtime'
import { describe, expect, it } from 'vitest'
import LimitBlock from '~/components/lessons/LimitBlock.vue'
import type { LimitBand, LimitView } from '#shared/contract/lessons'

const band = (more: Partial<LimitBand>): LimitBand => ({ band: { lo: 1.52, hi: 1.78, loKind: 'no-return', hiKind: 'put-right', softLo: 1.4, softHi: 1.52, borrowedFrom: null }, side: null, at: null, liftShare: null, words: '1.52 to 1.78 mm (0.060 to 0.070 in)', hard: null, ...more })
const limit = (bands: LimitBand[], more: Partial<LimitView> = {}): LimitView => ({ criterion: 'W-01', title: 'Seat land after bowl work', unit: 'mm', bands, casting: { code: 'SL-41', name: 'Sallow 41' }, ...more })
const shown = async (view: LimitView) => mountSuspended(LimitBlock, { props: { limit: view } })

describe('LimitBlock', () => {
  it('says the band in both units, the hard least and whose casting it is for, beside the rule', async () => {
    const block = await shown(limit([band({ hard: 'Hard least 1.4 mm (0.055 in): never under it.' })]))
    expect(block.attributes('aria-label')).toBe('Limit: Seat land after bowl work')
    for (const words of ['1.52 to 1.78 mm', '0.060 to 0.070 in', 'Hard least 1.4 mm (0.055 in): never under it.', 'For casting Sallow 41.', 'W-01']) expect(block.text()).toContain(words)
    // The rule says the same in a drawing: its own words ("Not read.") would be wrong in a lesson.
    expect(block.get('[data-part="band"]').element.closest('[aria-hidden="true"]')).not.toBeNull()
  })
  it('gives each side its own band, and says which', async () => {
    const block = await shown(limit([band({ side: 'intake' }), band({ side: 'exhaust', words: '1.78 to 2.03 mm (0.070 to 0.080 in)', band: { ...band({}).band, lo: 1.78, hi: 2.03 } })]))
    expect(block.text()).toMatch(/intake.*1\.52 to 1\.78.*exhaust.*1\.78 to 2\.03/)
    expect(block.findAll('svg')).toHaveLength(2)
  })
  it('says one band once where both sides are alike', async () => {
    const block = await shown(limit([band({ side: 'intake' }), band({ side: 'exhaust' })]))
    expect(block.findAll('svg')).toHaveLength(1)
    expect(block.text()).not.toContain('intake')
  })
  it('says that it does not apply, and draws nothing', async () => {
    const block = await shown(limit([]))
    expect(block.text()).toContain('Does not apply to casting Sallow 41.')
    expect(block.find('svg').exists()).toBe(false)
  })
})
