import { describe, expect, it } from 'vitest'
import { decide } from '#shared/domain/rubric/decide'
import { pickBands, scopeCovers } from '#shared/domain/rubric/pick-band'
import { whichDoubt } from '#shared/domain/rubric/which-doubt'
import { chanceOfAccept } from '#shared/domain/rubric/chance-of-accept'
import { unreachableBands } from '#shared/domain/rubric/unreachable-bands'
import { unreachableMusts } from '#shared/domain/rubric/unreachable-musts'
import { criterionOf, rubric } from './school'

/** The state of one value of a criterion of the school's rubric, on the Dunnock's intake unless told otherwise. */
function stateOf(id: string, value: number, doubt: number | null, side: 'intake' | 'exhaust' | null = 'intake') {
  const criterion = criterionOf(id)
  const [band] = pickBands(criterion, 'D', side)
  if (!band) throw new Error(`no band of ${id}`)
  return decide(value, doubt, band, criterion.mustPass)
}

describe('the decision rule', () => {
  // Each line is an example of the handbook, 3.1.
  it.each([
    ['C-01', 0.39, 0.15, 'accept'],
    ['C-01', 0.20, 0.15, 'borderline'],
    ['W-01', 1.62, 0.08, 'accept'],
    ['W-01', 1.56, 0.08, 'borderline'],
    ['B-06', 0.0, 0.2, 'accept'],
    ['P-01', 3.10, 0.15, 'borderline'],
    ['P-01', 3.60, 0.15, 'borderline'],
    ['P-01', 4.40, 0.15, 'accept'],
  ] as const)('says %s at %f ± %f is %4$s', (id, value, doubt, state) => {
    expect(stateOf(id, value, doubt).state).toBe(state)
  })

  it('accepts a limit cleared by exactly U, whatever the sixteenth digit says', () => {
    // 1.52 + 0.08 and 3.5 + 0.15 worked by hand; 90 - 0.15 = 89.85.
    expect(stateOf('W-01', 1.6, 0.08).state).toBe('accept')
    expect(stateOf('P-01', 3.65, 0.15).state).toBe('accept')
    expect(stateOf('W-03i', 89.85, 0.15).state).toBe('accept')
    expect(stateOf('P-01', 3.649, 0.15).state).toBe('borderline')
  })

  it('tests an end that can be put right on the value alone', () => {
    // W-01 upper end 1.78 can be put right: 1.78 with a doubt of 0.08 is accepted, 1.79 is not.
    expect(stateOf('W-01', 1.78, 0.08).state).toBe('accept')
    expect(stateOf('W-01', 1.79, 0.08)).toEqual({ state: 'borderline', end: 'high', beyond: 'short' })
  })

  it('never tests a natural end', () => {
    expect(stateOf('K-04', -2, 1).state).toBe('accept')
    // K-04 at 4.5 ± 1 does not clear 5, which is a no-return end of a must.
    expect(stateOf('K-04', 4.5, 1)).toEqual({ state: 'borderline', end: 'high', beyond: 'past' })
    expect(stateOf('K-04', 11.5, 1).state).toBe('reject')
    expect(stateOf('K-04', 10.9, 1).state).toBe('borderline')
  })

  it('rejects a must only when all of the interval lies outside accept and soft', () => {
    // P-01 soft begins at 3.0: 2.84 + 0.15 is under it, 2.86 + 0.15 is not.
    expect(stateOf('P-01', 2.84, 0.15)).toEqual({ state: 'reject', end: 'low', beyond: 'past' })
    expect(stateOf('P-01', 2.86, 0.15).state).toBe('borderline')
  })

  it('judges what is not a must on the value alone at every end', () => {
    // P-02 is not a must: accept 890 to 940, soft to 860 and 965.
    expect(stateOf('P-02', 939, 18).state).toBe('accept')
    expect(stateOf('P-02', 941, 18)).toEqual({ state: 'borderline', end: 'high', beyond: 'past' })
    expect(stateOf('P-02', 859, 18)).toEqual({ state: 'reject', end: 'low', beyond: 'short' })
  })

  it('tells a cut too far from a cut not far enough', () => {
    expect(stateOf('W-03i', 85, 0.15)).toEqual({ state: 'reject', end: 'low', beyond: 'short' })
    expect(stateOf('W-03i', 91, 0.15)).toEqual({ state: 'reject', end: 'high', beyond: 'past' })
  })

  it('refuses what is not a number instead of saying a quiet no', () => {
    expect(() => stateOf('P-01', Number.NaN, 0.15)).toThrow(RangeError)
    expect(() => stateOf('P-01', 4, Number.NaN)).toThrow(RangeError)
    expect(() => stateOf('P-01', Infinity, 0.15)).toThrow(RangeError)
  })
})

describe('bands by scope', () => {
  it('tells castings, sides and lifts apart', () => {
    expect(scopeCovers('*', 'W', null)).toBe(true)
    expect(scopeCovers('D', 'D', null)).toBe(true)
    expect(scopeCovers('DI', 'D', 'exhaust')).toBe(false)
    expect(scopeCovers('DI', 'D', null)).toBe(false)
    expect(scopeCovers('DI@0.12', 'D', 'intake')).toBe(true)
    expect(pickBands(criterionOf('FB-02i'), 'D', 'intake').map(band => band.liftShare)).toEqual([0.12, 0.18, 0.27])
  })

  it('takes the hull of accept and the soft intervals of the same scope and wall', () => {
    expect(pickBands(criterionOf('W-03i'), 'D', 'intake')[0]).toMatchObject({ lo: 87.5, hi: 90, softLo: 86, softHi: 90.7 })
    expect(pickBands(criterionOf('P-01w'), 'W', 'exhaust').find(band => band.at === 'exhaust stud boss')).toMatchObject({ lo: 4, softLo: 3.5, softHi: null })
    expect(pickBands(criterionOf('FB-02i'), 'W', 'intake')[2]?.borrowedFrom).toBe('DI@0.27')
  })
})

describe('which U decides', () => {
  it('takes the evaluator\'s own, but never less than the rubric\'s', () => {
    // Handbook 3.1: a photo may say 0.06 on the land; the rubric's 0.08 decides.
    expect(whichDoubt(criterionOf('W-01'), 1.6, 0.03)).toBe(0.08)
    expect(whichDoubt(criterionOf('W-01'), 1.6, 0.06)).toBe(0.12)
    expect(whichDoubt(criterionOf('W-01'), 1.6, null)).toBe(0.08)
  })
  it('gives counts and yes/no none, and reads a relative U off the value', () => {
    expect(whichDoubt(criterionOf('C-06'), 2, 0.5)).toBeNull()
    expect(whichDoubt(criterionOf('P-02'), 900, null)).toBeCloseTo(18, 10)
  })
})

describe('the chance of conforming', () => {
  // Handbook 3.1: 36.80, 36.90 and 36.95 on 41.00, U 0.15 on the share; P(over 90.0) 0.001, 0.50, 0.945.
  it.each([[36.8, 0.06, 0.02, 0.001], [36.9, 0.06, 0.02, 0.5], [36.95, 0.06, 0.02, 0.945]])('of a throat of %f', (throat, doubtThroat, doubtValve, over) => {
    const share = 100 * throat / 41
    const doubt = share * Math.hypot(doubtThroat / throat, doubtValve / 41)
    const [band] = pickBands(criterionOf('W-03i'), 'D', 'intake')
    if (!band) throw new Error('no band')
    expect(1 - (chanceOfAccept(share, doubt, null, { ...band, lo: null }) ?? 0)).toBeCloseTo(over, 2)
  })
  it('counts a natural end as infinite', () => {
    const [band] = pickBands(criterionOf('B-06'), 'D', 'intake')
    if (!band) throw new Error('no band')
    expect(chanceOfAccept(0, 0.2, null, band)).toBeCloseTo(1, 9)
  })
})

describe('a must with nothing to accept', () => {
  it('is not in the school\'s rubric', () => {
    expect(unreachableMusts(rubric)).toEqual([])
  })
  it('is found where the doubt eats the whole band', () => {
    // Both ends no-return and a band of 0.1 with U 0.08: it would have to clear both by more than there is.
    const narrow = { ...criterionOf('W-01'), accept: [{ scope: '*', lo: 1.5, hi: 1.6, loKind: 'no-return' as const, hiKind: 'no-return' as const }], soft: [] }
    expect(unreachableBands(narrow)).toHaveLength(1)
    expect(unreachableBands({ ...narrow, mustPass: false })).toEqual([])
    expect(unreachableBands({ ...narrow, expandedU: { value: 0.05, unit: 'mm', relative: false } })).toEqual([])
    expect(unreachableBands({ ...narrow, mustPass: false, accept: [{ scope: '*', lo: 2, hi: 1, loKind: 'put-right', hiKind: 'put-right' }] })).toHaveLength(1)
  })
})
