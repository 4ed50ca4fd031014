import { mountSuspended } from '@nuxt/test-utils/runtime'
import { describe, expect, it } from 'vitest'
import CurvePlot from '~/components/flow/CurvePlot.vue'

const point = (liftMm: number, cfm28: number) => ({ liftMm, cfm28, expandedUncertainty: 0.9 })
const runs = [
  { label: 'As received', points: [point(2.54, 52.1), point(5.08, 95), point(7.62, 118.2), point(10.16, 125.8)], missing: [] },
  { label: 'After bowl', points: [point(2.54, 49.3), point(7.62, 126), point(10.16, 136.7)], missing: [{ liftMm: 5.08, reason: 'crossed out' }] },
]
const changes = [
  { liftMm: 2.54, cfm: -2.8, expandedUncertainty: 0.9, percent: -5.4, verdict: 'loss' as const },
  { liftMm: 10.16, cfm: 10.9, expandedUncertainty: 1.3, percent: 8.7, verdict: 'gain' as const },
]
const plot = () => mountSuspended(CurvePlot, { props: { runs, changes, label: 'Cylinder 2 intake' } })

describe('CurvePlot', () => {
  it('reads every run out along the lifts from the keyboard', async () => {
    const wrapper = await plot()
    const frame = wrapper.get('[aria-roledescription="plot"]')
    const said = () => wrapper.get('[role="status"]').text()
    await frame.trigger('keydown', { key: 'ArrowRight' })
    expect(said()).toContain('2.54 mm (0.100 in)')
    expect(said()).toContain('As received: 52.1 ± 0.9 cfm')
    expect(said()).toContain('After bowl: 49.3 ± 0.9 cfm')
    expect(said()).toContain('−2.8 ± 0.9 cfm (−5.4 %), loss')
    await frame.trigger('keydown', { key: 'ArrowRight' })
    expect(said()).toContain('5.08 mm (0.200 in)')
    expect(said()).toContain('After bowl: missing, crossed out')
    await frame.trigger('keydown', { key: 'End' })
    expect(said()).toContain('10.16 mm (0.400 in)')
    await frame.trigger('keydown', { key: 'ArrowRight' })
    expect(said()).toContain('10.16 mm')
    await frame.trigger('keydown', { key: 'Home' })
    expect(said()).toContain('2.54 mm')
    await frame.trigger('keydown', { key: 'Escape' })
    expect(said()).not.toContain('2.54 mm')
  })
  it('breaks the line where a point is missing', async () => {
    const wrapper = await plot()
    const line = (run: number) => wrapper.findAll(`[data-run="${run}"] path`)[1]!.attributes('d')!
    // One start a piece: the run with a gap is drawn in two pieces (the first a single point).
    expect(line(0).match(/M/g)).toHaveLength(1)
    expect(line(1).match(/M/g)).toHaveLength(2)
  })
  it('marks the lifts that lost flow by a shape and in words', async () => {
    const wrapper = await plot()
    expect(wrapper.findAll('[data-part="lost"]').map(mark => mark.attributes('data-lift'))).toEqual(['2.54'])
    expect(wrapper.text()).toContain('flow lost')
    expect(wrapper.get('[aria-roledescription="plot"]').attributes('aria-label')).toContain('Flow lost at 2.54 mm (0.100 in)')
  })
  it('shows the same numbers as a table', async () => {
    const wrapper = await plot()
    await wrapper.findAll('button').find(button => button.text() === 'Show as a table')!.trigger('click')
    const rows = wrapper.findAll('tbody tr').map(row => row.text())
    expect(rows).toHaveLength(4)
    expect(rows[1]).toContain('missing, crossed out')
    expect(rows[0]).toContain('loss')
  })
  it('draws nothing, and does not fall over, when there is nothing yet', async () => {
    const wrapper = await mountSuspended(CurvePlot, { props: { runs: [], label: 'Cylinder 1 exhaust' } })
    await wrapper.get('[aria-roledescription="plot"]').trigger('keydown', { key: 'ArrowRight' })
    expect(wrapper.html()).not.toMatch(/NaN|Infinity/)
  })
})
