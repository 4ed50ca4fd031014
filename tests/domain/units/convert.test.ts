import { describe, expect, it } from 'vitest'
import { convert } from '#shared/domain/units/convert'
import { loadChecks } from '../../fixtures/reference/load-checks'

const checks = loadChecks('airflow-checks')

describe('convert', () => {
  it('turns inches into millimetres without a rounding of its own', () => {
    // 25.4 exactly, by definition of the inch.
    expect(convert(1, 'in', 'mm')).toBe(25.4)
    expect(convert(1.614, 'in', 'mm')).toBe(40.9956)
    expect(convert(50, 'thou', 'mm')).toBe(1.27)
  })

  it.each([
    ['CONV-01', 'inH2O', 'Pa'], ['CONV-05', 'inHg', 'Pa'], ['CONV-07', 'cmH2O', 'Pa'], ['CONV-09', 'mmHg', 'Pa'],
    ['CONV-11', 'cfm', 'm3/s'], ['CONV-12', 'in3', 'm3'], ['CONV-20', 'inH2O', 'Pa'], ['CONV-21', 'cfm', 'm3/s'], ['VOL-13', 'in3', 'cc'],
  ] as const)('agrees with %s: one %s in %s', (id, from, to) => {
    const check = checks.get(id)
    const expected = check?.expected.value as number
    // The printed factors are rounded to seven figures.
    expect(Math.abs(convert(1, from, to) / expected - 1)).toBeLessThan(5e-7)
  })

  it('goes there and back to the same number for every pair of pressures and flows', () => {
    for (const units of [['Pa', 'kPa', 'mbar', 'hPa', 'inH2O', 'mmH2O', 'cmH2O', 'psi'], ['cfm', 'l/s', 'l/min', 'm3/h', 'm3/s']]) {
      for (const from of units) for (const to of units) expect(convert(convert(12.34, from, to), to, from)).toBeCloseTo(12.34, 10)
    }
  })

  it('turns a mass flow into a volume flow by the density of the air, and refuses without it', () => {
    // By hand: 100 kg/h / 1.2041 kg/m3 = 83.0496 m3/h.
    expect(convert(100, 'kg/h', 'm3/h', { densityKgPerM3: 1.2041 })).toBeCloseTo(83.0496, 4)
    expect(convert(83.0496, 'm3/h', 'kg/h', { densityKgPerM3: 1.2041 })).toBeCloseTo(100, 3)
    expect(() => convert(100, 'kg/h', 'm3/h')).toThrow(RangeError)
  })

  it('knows where each temperature scale begins', () => {
    expect(convert(70, 'degF', 'degC')).toBeCloseTo(21.1111, 4)
    expect(convert(0, 'degC', 'K')).toBe(273.15)
  })

  it('refuses unknown units, units of another kind and numbers that are none', () => {
    expect(() => convert(1, 'furlong', 'mm')).toThrow(/unknown unit/)
    expect(() => convert(1, 'toString', 'mm')).toThrow(RangeError)
    expect(() => convert(1, 'mm', 'Pa')).toThrow(/length.*pressure/)
    expect(() => convert(Number.NaN, 'mm', 'in')).toThrow(RangeError)
  })
})
