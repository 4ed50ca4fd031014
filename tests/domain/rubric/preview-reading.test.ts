import { describe, expect, it } from 'vitest'
import castings from '../../../content/school/castings.json'
import rubric from '../../../content/school/rubric.json'
import type { CastingCard } from '#shared/domain/geometry/casting'
import type { Rubric } from '#shared/domain/rubric/criterion'
import { previewReading, type ReadingPreview } from '#shared/domain/rubric/preview-reading'

const dunnock = (castings as unknown as CastingCard[]).find(card => card.code === 'SL-41')!
const bowl = (rubric as unknown as Rubric).stages.find(stage => stage.op === 70)!
const pad: ReadingPreview = {
  stage: bowl, casting: dunnock, readings: [], op: 70, part: 'first', ports: [{ cylinder: 2, side: 'intake' }],
  want: { quantity: 'seat-land', cylinder: 2, side: 'intake', spot: '12', when: null },
  typed: ['1.62'], unit: 'mm', instrument: { code: 'loupe', expandedU: 0.08, relative: false, unit: 'mm' },
}

describe('what the pad shows before a reading is sent', () => {
  // Handbook 3.1: land 1.62 +/- 0.08 is accepted, 1.56 is borderline.
  it('accepts a land of 1.62 and calls 1.56 borderline, as the handbook does', () => {
    expect(previewReading(pad).find(result => result.criterion === 'W-01')).toMatchObject({ state: 'accept', value: 1.62, expandedUncertainty: 0.08 })
    expect(previewReading({ ...pad, typed: ['1.56'] }).find(result => result.criterion === 'W-01')?.state).toBe('borderline')
  })

  it('reads inches as the same length', () => {
    // 0.065 in is 1.651 mm exactly.
    expect(previewReading({ ...pad, typed: ['0.065'], unit: 'in' }).find(result => result.criterion === 'W-01')?.value).toBeCloseTo(1.651, 9)
  })

  it('shows nothing while the figure cannot be read', () => {
    expect(previewReading({ ...pad, typed: ['1,2,3'] })).toEqual([])
  })
})
