import { describe, expect, it } from 'vitest'
import type { Criterion } from '#shared/domain/rubric/criterion'
import { type Sayable, sentence } from '#shared/domain/rubric/sentence'
import { criterionOf, rubric } from './school'

const said = (more: Partial<Sayable>): Sayable => ({ state: 'accept', end: null, finding: null, value: null, expandedUncertainty: null, limit: null, at: null, fill: {}, plain: false, ...more })
const all = rubric.stages.flatMap(stage => stage.criteria)

describe('the sentence for the student', () => {
  it('says the side, the spot, and each figure with its unit once', () => {
    expect(sentence(criterionOf('W-01'), said({ state: 'borderline', end: 'low', value: 1.56, expandedUncertainty: 0.08, limit: 1.52, at: '12' })))
      .toBe('Down to 1.56 mm at 12 o\'clock: not proved over 1.52 mm. Do not go back near it.')
    expect(sentence(criterionOf('C-03'), said({ state: 'borderline', end: null, value: -0.62, limit: -0.6, at: 'radial 2' })))
      .toBe('0.62 mm against -0.6 mm: close, not settled.')
    expect(sentence(criterionOf('W-03i'), said({ state: 'reject', end: 'low', value: 85.02, limit: 87.5, fill: { todo: '1.0' } })))
      .toContain('About 1.0 mm of diameter to come')
  })

  it('puts the words of a stop first for a wall or a leak, and says them once', () => {
    const wall = sentence(criterionOf('W-06'), said({ state: 'reject', end: 'low', value: 3.1, limit: 4, at: 'bowl, fore' }))
    expect(wall.startsWith('Pressure test before anything else. This estimate has a doubt; the metal may be worse. 3.10 mm at bowl, fore')).toBe(true)
    expect(wall.match(/Pressure test before anything else/g)).toHaveLength(1)
    expect(sentence(criterionOf('P-01'), said({ state: 'borderline', end: 'low', value: 3.6, limit: 3.5, at: 'x' }))).toMatch(/^Pressure test before anything else\./)
    expect(sentence(criterionOf('P-01'), said({ state: 'accept', value: 4.4, at: 'x' }))).not.toContain('Pressure test')
    expect(sentence(criterionOf('C-01'), said({ state: 'reject', end: 'low', value: -0.4, at: '8' }))).toMatch(/^You have crossed the line at 8 o'clock by 0\.40 mm/)
  })

  it('uses the sentence of a finding only when the finding stands', () => {
    const lifts = { lifts: '1.00 mm (0.039 in)' }
    expect(sentence(criterionOf('FB-01'), said({ state: 'reject', finding: 'LowLifts', fill: lifts }))).toContain('look at the land width')
    expect(sentence(criterionOf('FB-01'), said({ state: 'reject', fill: lifts }))).toBe('Down beyond doubt at 1.00 mm (0.039 in).')
  })

  it('falls back to the first sentence without figures when a brace cannot be filled', () => {
    const three: Criterion = { ...criterionOf('W-02'), feedback: { accept: 'Reads {value} mm at {where}. Even all round. Steady hands.' } }
    expect(sentence(three, said({ value: 0.1 }))).toBe('Even all round.')
    expect(sentence(three, said({ value: 0.1, at: '12' }))).toBe('Reads 0.10 mm at 12 o\'clock. Even all round. Steady hands.')
    const bare: Criterion = { ...three, feedback: { accept: 'Only {speed} m/s.' } }
    expect(sentence(bare, said({}))).toBe('Within the band.')
  })

  it('leaves no brace unfilled and never says the iron is safe, for any criterion in any state', () => {
    const fills = [{}, { value: 1.234, expandedUncertainty: 0.1, limit: 1.5 }, { value: -1.234, at: 'station 30', limit: 2 }]
    const texts = all.flatMap(criterion => (['accept', 'borderline', 'reject'] as const).flatMap(state => ([null, 'low', 'high'] as const).flatMap(end =>
      [null, 'LowLifts', 'Digits', 'Ratio', 'Top'].flatMap(finding => fills.map(fill => sentence(criterion, said({ state, end, finding, ...fill })))))))
    expect(texts.length).toBeGreaterThan(10_000)
    for (const text of texts) {
      expect(text).not.toMatch(/[{}]|undefined|NaN|null/)
      expect(text.trim()).not.toBe('')
      expect(text).not.toMatch(/\bsafe\b|\bcleared\b|sleep/i)
    }
  })

  it('never proposes an example meant for the instructor', () => {
    const examples = new Set(all.flatMap(criterion => (criterion.examples ?? []).map(one => one.text)))
    expect(examples.size).toBeGreaterThan(10)
    for (const criterion of all) {
      for (const state of ['accept', 'borderline', 'reject'] as const) expect(examples.has(sentence(criterion, said({ state, value: 1, limit: 1, at: '12', fill: { n: '1', m: '2' } })))).toBe(false)
    }
  })
})
