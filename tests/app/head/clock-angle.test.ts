import { describe, expect, it } from 'vitest'
import { clockAngle, clockAngles } from '~/components/head/clock-angle'

describe('clock positions', () => {
  it('goes clockwise from twelve', () => {
    expect(clockAngle('12')).toBe(0)
    expect(clockAngle('3')).toBeCloseTo(Math.PI / 2)
    expect(clockAngle('9')).toBeCloseTo(3 * Math.PI / 2)
    expect(clockAngle('10:30')).toBeCloseTo(2 * Math.PI * 10.5 / 12)
  })
  it('gives both ends of a direction across, whatever its depth', () => {
    expect(clockAngles('2-8 lower')).toHaveLength(2)
    expect(clockAngles('2-8 lower')[1]! - clockAngles('2-8 lower')[0]!).toBeCloseTo(Math.PI)
  })
  it('leaves spots that are not on the clock', () => {
    for (const spot of ['bowl, fore', '13', '0', '3:75', 'station 30', '', '10 mm toward the cylinder wall']) expect(clockAngles(spot)).toEqual([])
  })
})
