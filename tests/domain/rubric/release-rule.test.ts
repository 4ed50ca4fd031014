import { describe, expect, it } from 'vitest'
import type { CriterionState, RubricPoint } from '#shared/domain/rubric/criterion'
import { neededUnits } from '#shared/domain/rubric/needed-units'
import { type ReleaseCase, releaseVerdict, type StandingResult } from '#shared/domain/rubric/release-rule'
import { casting, rubric, stageOf } from './school'

function pointOf(code: string): RubricPoint {
  const point = rubric.stages.flatMap(stage => stage.points).find(one => one.code === code)
  if (!point) throw new Error(`no point ${code}`)
  return point
}

/** A release of Hold 4 on cylinder 1 intake in which every criterion stands accepted, by somebody else than the student. */
function holdFour(states: Record<string, CriterionState> = {}, more: Partial<ReleaseCase> = {}): ReleaseCase {
  const results = stageOf('W').criteria.map((criterion): StandingResult => ({
    criterion: criterion.id, cylinder: 1, side: 'intake', at: criterion.id === 'W-06' ? 'bowl, fore' : null, state: states[criterion.id] ?? 'accept', overriddenTo: null,
  }))
  return { point: pointOf('hold-4'), stages: rubric.stages, units: [], results, reasons: [], by: 'hanne', student: 'imre', enteredOnBehalf: [], signedBefore: [], ...more }
}

// Each case is a sentence of the handbook, 3.4.
describe('the release rule', () => {
  it('releases what is accepted', () => {
    expect(releaseVerdict(holdFour())).toEqual({ allowed: true, refused: [], needReason: [], conditions: [], complete: true })
  })

  it('lets what is no must be rejected', () => {
    expect(releaseVerdict(holdFour({ 'W-02': 'reject', 'W-04': 'not-assessed' })).allowed).toBe(true)
  })

  it('wants a reason typed for each must that is borderline or not assessed', () => {
    const states = { 'W-01': 'borderline', 'W-08': 'not-assessed' } as const
    const bare = releaseVerdict(holdFour(states))
    expect(bare.allowed).toBe(false)
    expect(bare.needReason.map(one => one.criterion)).toEqual(['W-01', 'W-08'])
    const one = releaseVerdict(holdFour(states, { reasons: [{ criterion: 'W-01', reason: 'read again by me: 1.58' }] }))
    expect(one.needReason.map(need => need.criterion)).toEqual(['W-08'])
    const both = holdFour(states, { reasons: [{ criterion: 'W-01', reason: 'read again by me: 1.58' }, { criterion: 'W-08', cylinder: 1, side: 'intake', reason: 'I stood beside it' }] })
    expect(releaseVerdict(both).allowed).toBe(true)
    expect(releaseVerdict({ ...both, reasons: [{ criterion: 'W-01', reason: ' ' }, { criterion: 'W-08', cylinder: 2, reason: 'another port' }] }).needReason).toHaveLength(2)
  })

  it('never releases a rejected must, whatever is typed', () => {
    const verdict = releaseVerdict(holdFour({ 'W-01': 'reject' }, { reasons: [{ criterion: 'W-01', reason: 'please' }] }))
    expect(verdict.allowed).toBe(false)
    expect(verdict.refused[0]).toMatchObject({ criterion: 'W-01', cylinder: 1, side: 'intake', state: 'reject' })
  })

  it('never releases a stop that is rejected or not assessed', () => {
    for (const state of ['reject', 'not-assessed'] as const) {
      const verdict = releaseVerdict(holdFour({ 'W-06': state }, { reasons: [{ criterion: 'W-06', reason: 'looks fine' }] }))
      expect(verdict.allowed).toBe(false)
      expect(verdict.refused[0]).toMatchObject({ criterion: 'W-06', state, at: 'bowl, fore' })
    }
  })

  it('adds "no more cutting" where a stop is borderline', () => {
    const verdict = releaseVerdict(holdFour({ 'W-06': 'borderline' }))
    expect(verdict.allowed).toBe(true)
    expect(verdict.conditions).toEqual([{ criterion: 'W-06', cylinder: 1, side: 'intake', at: 'bowl, fore', text: 'no more cutting at bowl, fore, cylinder 1 intake' }])
  })

  it('goes by the person\'s state, except that nobody lifts a stop', () => {
    const overridden = (id: string, from: CriterionState, to: CriterionState) => {
      const asked = holdFour({ [id]: from })
      return releaseVerdict({ ...asked, results: asked.results.map(result => result.criterion === id ? { ...result, overriddenTo: to } : result) })
    }
    expect(overridden('W-01', 'reject', 'borderline').needReason).toHaveLength(1)
    expect(overridden('W-01', 'borderline', 'accept').allowed).toBe(true)
    expect(overridden('W-06', 'reject', 'borderline').allowed).toBe(false)
    expect(overridden('W-06', 'borderline', 'accept').conditions).toHaveLength(1)
    expect(overridden('W-06', 'accept', 'reject').allowed).toBe(false)
  })

  it('does not let the student, or whoever entered a must\'s reading, release', () => {
    expect(releaseVerdict(holdFour({}, { by: 'imre' })).refused[0]?.why).toContain('own work')
    const entered = { by: 'hanne', quantity: 'seat-land', op: 70 }
    expect(releaseVerdict(holdFour({}, { enteredOnBehalf: [entered] })).refused.map(one => one.criterion)).toContain('W-01')
    expect(releaseVerdict(holdFour({}, { enteredOnBehalf: [{ ...entered, by: 'silas' }] })).allowed).toBe(true)
    expect(releaseVerdict(holdFour({}, { enteredOnBehalf: [{ ...entered, op: 160 }] })).allowed).toBe(true)
    // W-07, the radial cut, is no must.
    expect(releaseVerdict(holdFour({}, { enteredOnBehalf: [{ ...entered, quantity: 'mean-radial-cut' }] })).allowed).toBe(true)
  })

  it('opens Hold 8 only after two different people', () => {
    const results = rubric.stages.flatMap(stage => stage.criteria).map((criterion): StandingResult => ({ criterion: criterion.id, cylinder: null, side: null, at: null, state: 'accept', overriddenTo: null }))
    const first = holdFour({}, { point: pointOf('hold-8'), results })
    expect(releaseVerdict(first)).toMatchObject({ allowed: true, complete: false })
    expect(releaseVerdict({ ...first, by: 'marit', signedBefore: ['hanne'] })).toMatchObject({ allowed: true, complete: true })
    expect(releaseVerdict({ ...first, signedBefore: ['hanne'] }).allowed).toBe(false)
  })

  it('misses what has no result at a port the point covers', () => {
    const all = Array.from({ length: 4 }, (_, index) => (['intake', 'exhaust'] as const).map(side => ({ cylinder: index + 1, side }))).flat()
    const units = neededUnits(pointOf('hold-5'), rubric.stages, casting('D'), all, null)
    expect(units.filter(one => one.criterion === 'W-01')).toHaveLength(8)
    expect(units.filter(one => one.criterion === 'FB-01')).toEqual([
      { criterion: 'FB-01', unit: { cylinder: null, side: 'intake' } }, { criterion: 'FB-01', unit: { cylinder: null, side: 'exhaust' } },
    ])
    const onlyOne = { ...holdFour(), point: pointOf('hold-5'), units }
    const verdict = releaseVerdict(onlyOne)
    expect(verdict.refused.filter(one => one.criterion === 'W-06')).toHaveLength(7)
    expect(verdict.needReason.filter(one => one.criterion === 'W-01')).toHaveLength(7)
  })

  it('asks nothing of what does not apply', () => {
    const units = neededUnits(pointOf('hold-6'), rubric.stages, casting('D'), [{ cylinder: 1, side: 'intake' }], null)
    expect(units).toEqual([{ criterion: 'P-01', unit: { cylinder: 1, side: 'intake' } }])
  })
})
