import { expect, it } from 'vitest'
import { partsOfStage } from '#shared/domain/rubric/covers'
import { pointOfPart, routeState, type RouteCase, type RouteSubmission } from '#shared/domain/rubric/route-state'
import { rubric } from './school'

// What each case expects is the handbook's: 3.4 (what a point lets on, states of a hold), 7 (clearances), DESIGN "Stages and points".
const { stages } = rubric
const minute = 60_000
const now = 1_000_000 * minute
const tools = ['hot-tank', 'pressure-rig', 'flow-bench', 'die-grinder', 'right-angle-grinder']
const cleared = tools.map(tool => ({ tool, from: 0, until: now + 1000 * minute }))

const submission = (given: Partial<RouteSubmission> & { op: number }): RouteSubmission => ({ id: `${given.op} ${given.part ?? 'rest'} ${given.try ?? 1}`, part: 'rest', try: 1, state: 'draft', decision: null, askedAt: null, decidedAt: null, ...given })
const released = (point: string, by = 'hanne') => ({ point, by, at: now - 50 * minute, conditions: [] as string[], shutAgain: false })

/** A head whose every part before `op` is behind it, changed as the case says. */
function route(op: number, change: Partial<RouteCase> = {}) {
  const before = stages.filter(stage => stage.op < op)
  const submissions = before.flatMap(stage => partsOfStage(stage).map(part => submission({ op: stage.op, part, state: 'decided', decision: 'release', decidedAt: now - 50 * minute })))
  const points = before.flatMap(stage => stage.points)
  const base: RouteCase = {
    stages, now, headState: 'working', personal: false, stops: [], clearances: cleared, consent: 'signed', submissions,
    releases: points.filter(point => point.kind === 'hold').flatMap(point => ['hanne', 'marit'].slice(0, point.signersNeeded ?? 1).map(by => released(point.code, by))),
    calls: points.filter(point => point.kind === 'witness').map(point => ({ point: point.code, toldAt: now - 90 * minute, waitUntil: now - 60 * minute, seenAt: null, seenBy: null })),
  }
  const given = { ...base, ...change, submissions: [...base.submissions, ...change.submissions ?? []], releases: [...base.releases, ...change.releases ?? []], calls: [...base.calls, ...change.calls ?? []] }
  const states = routeState(given)
  return {
    at: (which: number) => {
      const stage = states.find(one => one.op === which)
      if (!stage) throw new Error(`no op ${which}`)
      return stage
    },
    point: (code: string) => {
      const point = states.flatMap(stage => stage.points).find(one => one.code === code)
      if (!point) throw new Error(`no ${code}`)
      return point
    },
  }
}

it('opens a new head at receiving and cleaning, and nothing behind Hold 1', () => {
  const head = route(0)
  expect([head.at(10).state, head.at(20).state]).toEqual(['open', 'open'])
  expect(head.at(30)).toMatchObject({ state: 'shut', why: 'Hold 1 comes first.', shutBy: 'stage_not_open' })
})

it('puts every point of the school on a part that comes due', () => {
  for (const stage of stages) {
    const carried = partsOfStage(stage).map(part => pointOfPart(stage, part)?.code).filter(Boolean)
    expect(carried, `op ${stage.op}`).toEqual(stage.points.map(point => point.code))
  }
})

it('asks the first bowl of Hold 4 before the rest, and holds the stage while it is asked', () => {
  expect(route(70).at(70).due).toMatchObject({ part: 'first', point: 'hold-4', try: 1, submission: null })
  const asked = route(70, { submissions: [submission({ op: 70, part: 'first', state: 'asked', askedAt: now })] })
  expect(asked.at(70)).toMatchObject({ state: 'held', why: 'Hold 4 is asked and not released yet.' })
  expect(asked.point('hold-4')).toMatchObject({ state: 'asked', at: now })
  expect(asked.at(90)).toMatchObject({ state: 'shut', why: 'Hold 4 is asked, not released.' })
})

it('lets the other bowls be cut once Hold 4 is released', () => {
  const head = route(70, { submissions: [submission({ op: 70, part: 'first', state: 'decided', decision: 'release', decidedAt: now })], releases: [released('hold-4')] })
  expect(head.at(70)).toMatchObject({ state: 'open', due: { part: 'rest', point: null, try: 1 } })
  expect(head.at(90).state).toBe('open')
  expect(head.at(110)).toMatchObject({ state: 'shut', why: 'Hold 5 comes first.' })
})

it('is due again as the next try once sent back, and stays shut behind it', () => {
  const head = route(70, { submissions: [submission({ op: 70, part: 'first', state: 'decided', decision: 'send-back', decidedAt: now })] })
  expect(head.at(70)).toMatchObject({ state: 'open', due: { part: 'first', try: 2, submission: null } })
  expect(head.point('hold-4').state).toBe('sent back')
  expect(head.at(90).why).toBe('Hold 4 is sent back, not released.')
  const again = route(70, { submissions: [submission({ op: 70, part: 'first', state: 'decided', decision: 'send-back' }), submission({ op: 70, part: 'first', try: 2, state: 'asked', askedAt: now })] })
  expect(again.point('hold-4').state).toBe('asked')
})

it('says that a release carries a condition, and shuts again what newer evidence contradicts', () => {
  const done = submission({ op: 70, part: 'first', state: 'decided', decision: 'release', decidedAt: now })
  const head = route(70, { submissions: [done], releases: [{ ...released('hold-4'), conditions: ['no more at 8 o\'clock'] }] })
  expect(head.point('hold-4')).toMatchObject({ state: 'released with a condition', conditions: ['no more at 8 o\'clock'], letsOn: true })
  const shut = route(70, { submissions: [done], releases: [{ ...released('hold-4'), shutAgain: true }] })
  expect(shut.point('hold-4')).toMatchObject({ state: 'shut', letsOn: false })
  expect(shut.at(70).due).toMatchObject({ part: 'first', try: 2 })
  expect(shut.at(90).state).toBe('shut')
})

it('opens Hold 8 only when two different people released it', () => {
  const asked = [submission({ op: 190, state: 'scored', askedAt: now })]
  const twice = route(190, { submissions: asked, releases: [released('hold-8'), released('hold-8')] })
  expect(twice.point('hold-8')).toMatchObject({ state: 'asked', letsOn: false })
  expect(twice.at(200).state).toBe('shut')
  const two = route(190, { submissions: asked, releases: [released('hold-8'), released('hold-8', 'marit')] })
  expect(two.point('hold-8')).toMatchObject({ state: 'released', by: 'marit', letsOn: true })
  expect(two.at(200).state).toBe('open')
})

it('lets work go on past a witness point when it was told and the wait is over, or when somebody came', () => {
  const first = submission({ op: 60, part: 'first', state: 'scored', askedAt: now })
  const call = { point: 'witness-1', toldAt: now, waitUntil: now + 30 * minute, seenAt: null, seenBy: null }
  const told = route(60, { submissions: [first], calls: [call] })
  expect(told.point('witness-1')).toMatchObject({ state: 'told', waitUntil: now + 30 * minute })
  expect(told.at(60).state).toBe('held')
  expect(told.at(70)).toMatchObject({ state: 'shut', why: 'Witness 1 was told; its wait is not over.' })
  const over = route(60, { submissions: [first], calls: [{ ...call, waitUntil: now }] })
  expect(over.point('witness-1').state).toBe('not seen')
  expect(over.at(60).due).toMatchObject({ part: 'rest', point: null })
  expect(over.at(70).state).toBe('open')
  const seen = route(60, { submissions: [first], calls: [{ ...call, seenAt: now, seenBy: 'silas' }] })
  expect(seen.point('witness-1')).toMatchObject({ state: 'seen', by: 'silas', letsOn: true })
  expect(route(70, {}).at(70).state).toBe('open')
  expect(route(60).at(70).why).toBe('Witness 1 comes first: nobody was told of it yet.')
})

it('does not open a stage without its clearances, and shuts it at the moment one lapses', () => {
  const none = route(70, { clearances: [] })
  expect(none.at(70)).toMatchObject({ state: 'shut', shutBy: 'clearance_missing', why: 'You are not cleared for the die grinder. See the safety officer.' })
  const until = (moment: number) => cleared.map(one => (one.tool === 'die-grinder' ? { ...one, until: moment } : one))
  expect(route(70, { clearances: until(now + 1) }).at(70).state).toBe('open')
  expect(route(70, { clearances: until(now) }).at(70)).toMatchObject({ state: 'shut', shutBy: 'clearance_missing', why: 'Your clearance for the die grinder has lapsed. See the safety officer.' })
  expect(route(30, { clearances: [] }).at(40).shutBy).toBe('stage_not_open')
})

it('shuts everything that is not done while a stop stands, and keeps what is done', () => {
  const head = route(70, { stops: [{ where: 'bowl wall, cylinder 1 intake', reason: 'Pressure test first.' }] })
  expect(head.at(70)).toMatchObject({ state: 'shut', shutBy: 'head_stopped', why: 'A stop stands on this head: bowl wall, cylinder 1 intake. Pressure test first.' })
  expect(head.at(30)).toMatchObject({ state: 'done', shutBy: 'head_stopped' })
})

it('shuts a scrapped head but for its sectioning, and a sawn one whole', () => {
  const scrapped = route(110, { headState: 'scrapped' })
  expect(scrapped.at(110)).toMatchObject({ state: 'shut', why: 'This head is scrapped. No more work is done on it.' })
  expect(scrapped.at(210).state).toBe('open')
  expect(route(110, { headState: 'sawn' }).at(210).state).toBe('shut')
})

it('measures a head of one\'s own along the whole route: no points, no clearances, a stage done when it is scored', () => {
  const head = route(0, { personal: true, clearances: [], submissions: [submission({ op: 70, state: 'scored' })] })
  expect(head.at(140)).toMatchObject({ state: 'open', points: [], due: { part: 'rest', point: null } })
  expect(head.at(70).state).toBe('done')
})

it('is shut without the safety form wherever a tool is needed, whoever is cleared, and nowhere else', () => {
  // Handbook 5.6 and 7: without the form one may watch and not cut; re-asked when a safety clause changes.
  const never = route(70, { consent: 'none' })
  expect(never.at(70)).toMatchObject({ state: 'shut', shutBy: 'consent_missing', why: 'Sign the safety form first.' })
  const again = route(70, { consent: 'asked again' })
  expect(again.at(70)).toMatchObject({ state: 'shut', shutBy: 'consent_missing', why: 'The safety form changed since you signed it. Sign it again first.' })
  expect(route(40, { consent: 'none' }).at(40).state).toBe('open')
  expect(route(70, { consent: 'none', clearances: [] }).at(70).shutBy).toBe('consent_missing')
  // A head of one's own is cut in a shop of one's own.
  expect(route(0, { consent: 'none', personal: true }).at(70).state).toBe('open')
})
