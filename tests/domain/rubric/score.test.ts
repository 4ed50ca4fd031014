import { describe, expect, it } from 'vitest'
import type { Criterion, CriterionState } from '#shared/domain/rubric/criterion'
import { overrideRefusal } from '#shared/domain/rubric/override-refusal'
import { score } from '#shared/domain/rubric/score'
import { word } from '#shared/domain/rubric/word'
import { worstState } from '#shared/domain/rubric/worst-state'
import { criterionOf } from './school'

const criterion = (id: string, weight: number, mustPass = false): Criterion => ({ ...criterionOf('W-02'), id, weight, mustPass })
const of = (states: Record<string, CriterionState>) => Object.entries(states).map(([id, state]) => ({ criterion: id, state }))

describe('the score', () => {
  const criteria = [criterion('a', 5, true), criterion('b', 3), criterion('c', 2)]

  it('weighs accept 1, borderline 0.6 and reject 0', () => {
    // Worked by hand: (5 + 3 x 0.6 + 0) / 10.
    expect(score(of({ a: 'accept', b: 'borderline', c: 'reject' }), criteria)).toBeCloseTo(68, 10)
  })
  it('leaves out what was not assessed and what does not apply', () => {
    expect(score(of({ a: 'accept', b: 'not-assessed', c: 'does-not-apply' }), criteria)).toBe(100)
    expect(score(of({ b: 'not-assessed' }), criteria)).toBeNull()
  })
  it('counts a criterion once, with its worst result', () => {
    expect(score([...of({ a: 'accept', b: 'accept' }), { criterion: 'b', state: 'reject' }], criteria)).toBeCloseTo(500 / 8, 10)
  })
  it('does not take a result of a criterion it was not given', () => {
    expect(() => score(of({ z: 'accept' }), criteria)).toThrow(RangeError)
  })
  it('puts not assessed between reject and borderline', () => {
    expect(worstState(['accept', 'not-assessed', 'borderline'])).toBe('not-assessed')
    expect(worstState(['reject', 'not-assessed'])).toBe('reject')
    expect(worstState(['does-not-apply', 'accept'])).toBe('accept')
  })
})

describe('the word', () => {
  // Handbook 3.3: 90 with one open reject, and 84.5, are Workable.
  it('says Workable for 90 with one reject that is no must', () => {
    const criteria = [criterion('a', 9, true), criterion('b', 1)]
    expect(word(of({ a: 'accept', b: 'reject' }), criteria)).toBe('Workable')
    expect(word(of({ a: 'accept', b: 'accept' }), criteria)).toBe('Sound')
  })
  it('says Workable for 84.5 and Sound for 85', () => {
    // 100 (x + 0.6 y) / (x + y): 61.25 and 38.75 give 84.5; 62.5 and 37.5 give 85.
    expect(word(of({ a: 'accept', b: 'borderline' }), [criterion('a', 61.25), criterion('b', 38.75)])).toBe('Workable')
    expect(word(of({ a: 'accept', b: 'borderline' }), [criterion('a', 62.5), criterion('b', 37.5)])).toBe('Sound')
  })
  it('says Rework for a rejected must however high the score', () => {
    expect(word(of({ a: 'reject', b: 'accept' }), [criterion('a', 1, true), criterion('b', 99)])).toBe('Rework')
    expect(word(of({ a: 'accept', b: 'reject' }), [criterion('a', 69, true), criterion('b', 31)])).toBe('Rework')
  })
  it('says not yet while a must is not assessed, even beside a rejected one', () => {
    const criteria = [criterion('a', 5, true), criterion('b', 5)]
    expect(word(of({ a: 'not-assessed', b: 'accept' }), criteria)).toBe('not yet')
    expect(word([...of({ a: 'reject' }), { criterion: 'a', state: 'not-assessed' }], criteria)).toBe('not yet')
    expect(word(of({ a: 'accept', b: 'not-assessed' }), criteria)).toBe('Sound')
  })
})

describe('an override', () => {
  const land = criterionOf('W-01')
  const wall = criterionOf('P-01')
  const ask = (criterion: Criterion, from: CriterionState, to: CriterionState, reason = 'seen on the iron') => overrideRefusal({ criterion, from, to, reason })

  it('moves a state one step with a reason', () => {
    expect(ask(land, 'reject', 'borderline')).toBeNull()
    expect(ask(land, 'accept', 'borderline')).toBeNull()
    expect(ask(land, 'reject', 'accept')).toContain('one step')
    expect(ask(land, 'reject', 'borderline', '  ')).toContain('why')
    expect(ask(land, 'accept', 'accept')).not.toBeNull()
  })
  it('cannot lift a stop, but can make one stricter', () => {
    expect(ask(wall, 'borderline', 'accept')).toContain('cannot lift')
    expect(ask(wall, 'accept', 'borderline')).toBeNull()
  })
  it('neither sets nor lifts does not apply, and does not stand in for evidence', () => {
    expect(ask(land, 'accept', 'does-not-apply')).not.toBeNull()
    expect(ask(land, 'does-not-apply', 'accept')).not.toBeNull()
    expect(ask(land, 'accept', 'not-assessed')).not.toBeNull()
    expect(ask(land, 'not-assessed', 'accept')).toContain('evidence')
  })
  it('gives a judged criterion its first state', () => {
    expect(ask(criterionOf('R-01'), 'not-assessed', 'accept')).toBeNull()
    expect(ask(criterionOf('V-01'), 'not-assessed', 'reject')).toBeNull()
    expect(ask(criterionOf('L-06'), 'not-assessed', 'accept')).toBeNull()
  })
})
