import { describe, expect, it } from 'vitest'
import { inOtherUnit } from '~/components/ui/both-units'
import { withoutDoubt, writeWithDoubt } from '~/components/ui/with-doubt'
import { writtenUnit } from '~/components/ui/written-unit'

describe('both units', () => {
  it('gives a length in the other unit with a thousandth of an inch to a hundredth of a millimetre', () => {
    // 1.62 / 25.4 = 0.06378; 1.614 x 25.4 = 40.9956 (the inch is 25.4 mm exactly).
    expect(inOtherUnit(1.62, 'mm', 2)).toBe('0.064 in')
    expect(inOtherUnit(1.614, 'in', 3)).toBe('41.00 mm')
    expect(inOtherUnit(0.05, 'mm proud', 2)).toBe('0.002 in')
    expect(inOtherUnit(89.9, '%', 1)).toBeNull()
  })
  it('writes a value to the place of its doubt, as the handbook does', () => {
    expect(writeWithDoubt(1.62, 0.08)).toMatchObject({ value: '1.62', doubt: '0.08' })
    expect(writeWithDoubt(3.314, 0.15)).toMatchObject({ value: '3.31', doubt: '0.15' })
    expect(writeWithDoubt(0, 0.2)).toMatchObject({ value: '0.0', doubt: '0.2' })
    expect(writeWithDoubt(-0.01, 0.2)).toMatchObject({ value: '0.0', doubt: '0.2' })
    expect(writeWithDoubt(900.4, 18)).toMatchObject({ value: '900', doubt: '18' })
    expect(writeWithDoubt(12, 1)).toMatchObject({ value: '12', doubt: '1' })
    expect(writeWithDoubt(12.34, 10)).toMatchObject({ value: '12', doubt: '10' })
  })
  it('writes units as people do', () => {
    expect(writtenUnit('mm2')).toBe('mm²')
    expect(writtenUnit('m3/s')).toBe('m³/s')
    expect(writtenUnit('inH2O')).toBe('inH₂O')
    expect(writtenUnit('cfm @28')).toBe('cfm')
    expect(writtenUnit('1')).toBe('')
  })
  it('gives a value without a doubt no more digits than it has', () => {
    expect(withoutDoubt(0.1 + 0.2)).toEqual({ value: '0.3', decimals: 1 })
    expect(withoutDoubt(-0.0001)).toEqual({ value: '0', decimals: 0 })
  })
})
