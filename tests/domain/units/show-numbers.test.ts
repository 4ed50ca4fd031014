import { describe, expect, it } from 'vitest'
import { formatLength } from '#shared/domain/units/format-length'
import { formatWithDoubt } from '#shared/domain/units/format-with-doubt'
import { plausibleLength } from '#shared/domain/units/plausible-length'
import { roundToDoubt } from '#shared/domain/units/round-to-doubt'

describe('roundToDoubt', () => {
  it('gives the doubt two digits and the value the same place', () => {
    expect(roundToDoubt(125.846, 0.9161)).toEqual({ value: '125.85', doubt: '0.92', decimals: 2 })
    expect(roundToDoubt(1.6234, 0.08)).toEqual({ value: '1.623', doubt: '0.080', decimals: 3 })
    expect(roundToDoubt(1234.6, 25.4)).toEqual({ value: '1235', doubt: '25', decimals: 0 })
  })
  it('moves a place up where rounding the doubt does', () => {
    expect(roundToDoubt(3.14159, 0.0996)).toEqual({ value: '3.14', doubt: '0.10', decimals: 2 })
    expect(roundToDoubt(123456, 1234)).toEqual({ value: '123500', doubt: '1200', decimals: 0 })
  })
  it('never shows a minus in front of nought', () => {
    expect(roundToDoubt(-0.001, 0.2).value).toBe('0.00')
  })
  it('refuses a doubt that is none', () => {
    for (const doubt of [0, -1, Number.NaN, Infinity]) expect(() => roundToDoubt(1, doubt)).toThrow(RangeError)
  })
})

it('shows a length in both units, and a value with its doubt', () => {
  // 1.62 / 25.4 = 0.0638.
  expect(formatLength(1.62)).toBe('1.62 mm (0.064 in)')
  expect(formatWithDoubt(36.4967, 0.06, 'mm')).toBe('36.497 ± 0.060 mm')
})

describe('plausibleLength', () => {
  it('takes what a factor of four allows and refuses another unit with a sentence', () => {
    expect(plausibleLength('throat', 36.5, 36.5)).toEqual({ plausible: true })
    expect(plausibleLength('throat', 33.6 * 4, 33.6)).toEqual({ plausible: true })
    // 41 typed with inches chosen; 1.437 in typed with mm chosen.
    expect(plausibleLength('throat', 41 * 25.4, 36.5)).toMatchObject({ plausible: false, message: expect.stringMatching(/Check the unit/) })
    expect(plausibleLength('throat', 1.437, 36.5).plausible).toBe(false)
  })
})
