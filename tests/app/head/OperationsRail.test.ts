import { mountSuspended } from '@nuxt/test-utils/runtime'
import { describe, expect, it } from 'vitest'
import type { StageView } from '#shared/contract/views'
import OperationsRail from '~/components/head/OperationsRail.vue'

const point = (name: string, state: StageView['points'][number]['state'], at: string | null = null): StageView['points'][number] => ({ code: name.toLowerCase().replace(' ', '-'), name, kind: name.startsWith('Hold') ? 'hold' : 'witness', when: 'after', state, at, by: null, conditions: [], waitUntil: null })
const stage = (op: number, name: string, state: StageView['state'], points: StageView['points'] = [], why: string | null = null): StageView => ({ op, code: `S${op}`, name, state, why, points, lessons: [], submission: null })
const stages = [
  stage(20, 'Clean, crack check', 'done', [point('Hold 1', 'released', '2026-02-11T23:30:00Z')]),
  stage(40, 'Layout', 'done'),
  stage(60, 'Chamber', 'held', [point('Witness 1', 'told', '2026-02-26T10:00:00Z')]),
  stage(70, 'Bowl, first article', 'open', [point('Hold 4', 'asked', '2026-03-02T10:00:00Z')], 'Cut no second bowl.'),
  stage(90, 'Guide and widening', 'shut'),
  stage(100, 'Flow after bowl', 'shut', [point('Hold 5', 'shut')]),
]

describe('OperationsRail', () => {
  it('writes every operation with its number, its state and how its points stand', async () => {
    const rail = await mountSuspended(OperationsRail, { props: { stages, nowOp: 70 } })
    const rows = rail.findAll('li')
    expect(rows).toHaveLength(6)
    expect(rows[0]!.text()).toContain('20')
    expect(rows[0]!.text()).toContain('Done; Hold 1 released 11 Feb')
    expect(rows[5]!.text()).toContain('Shut; Hold 5 shut')
  })
  it('tells holds from witness points and plain stages by the tick, and the present stage by more than its colour', async () => {
    const rail = await mountSuspended(OperationsRail, { props: { stages, nowOp: 70 } })
    expect(rail.findAll('li').map(row => row.attributes('data-kind'))).toEqual(['hold', 'plain', 'witness', 'hold', 'plain', 'hold'])
    expect(rail.findAll('[aria-current="step"]').map(row => row.text()).join()).toContain('Cut no second bowl.')
    expect(rail.findAll('[aria-current="step"]')).toHaveLength(1)
  })
  it('links only where it is told to', async () => {
    const rail = await mountSuspended(OperationsRail, { props: { stages, nowOp: 70, to: (one: StageView) => one.state === 'shut' ? null : `/stages/${one.op}` } })
    expect(rail.findAll('a').map(link => link.attributes('href'))).toEqual(['/stages/20', '/stages/40', '/stages/60', '/stages/70'])
  })
  it('shows the stages round the present one when short, and all on demand', async () => {
    const rail = await mountSuspended(OperationsRail, { props: { stages, nowOp: 70, short: true } })
    expect(rail.findAll('li')).toHaveLength(4)
    await rail.get('button').trigger('click')
    expect(rail.findAll('li')).toHaveLength(6)
  })
})
