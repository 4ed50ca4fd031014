import { describe, expect, it } from 'vitest'
import { chanceInWords, stopInInches, takeInInches } from '~/components/rubric/metal-figures'

describe('metal figures', () => {
  it('rounds what may be taken down and where to stop up, so that an error leaves metal', () => {
    // 0.6 mm is 0.023622 in, 3.5 mm is 0.137795 in (25.4 mm to the inch, exact).
    expect(takeInInches(0.6)).toBe('0.023')
    expect(stopInInches(3.5)).toBe('0.138')
    // 2.54 mm is a tenth of an inch exactly: rounding must not move it.
    expect(takeInInches(2.54)).toBe('0.100')
    expect(stopInInches(2.54)).toBe('0.100')
  })
  it('never says that something cannot happen or must', () => {
    expect(chanceInWords(0)).toBe('under 0.01 %')
    expect(chanceInWords(1)).toBe('over 99.9 %')
    // The handbook's examples of a wall cut by 1.0 and 1.4 mm: 0.061 and 0.80.
    expect(chanceInWords(0.061)).toBe('6.1 %')
    expect(chanceInWords(0.8)).toBe('80 %')
    expect(() => chanceInWords(Number.NaN)).toThrow(RangeError)
  })
})
