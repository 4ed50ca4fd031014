import { describe, expect, it } from 'vitest'
import { chanceOfConforming } from '#shared/domain/uncertainty/chance-of-conforming'
import { combineInQuadrature } from '#shared/domain/uncertainty/combine-in-quadrature'
import { effectiveDegreesOfFreedom } from '#shared/domain/uncertainty/effective-degrees-of-freedom'
import { leastSquaresLine } from '#shared/domain/uncertainty/least-squares-line'
import { meanOfReadings } from '#shared/domain/uncertainty/mean-of-readings'
import { median } from '#shared/domain/uncertainty/median'
import { normalCdf } from '#shared/domain/uncertainty/normal-cdf'
import { normalQuantile } from '#shared/domain/uncertainty/normal-quantile'
import { pooledStandardDeviation } from '#shared/domain/uncertainty/pooled-standard-deviation'
import { standardUncertaintyOfBounds } from '#shared/domain/uncertainty/standard-uncertainty-of-bounds'
import { studentTCdf } from '#shared/domain/uncertainty/student-t-cdf'
import { studentTQuantile } from '#shared/domain/uncertainty/student-t-quantile'
import { theilSenLine } from '#shared/domain/uncertainty/theil-sen-line'
import { loadChecks } from '../../fixtures/reference/load-checks'

const checks = loadChecks('metrology-checks')

/** A check by id, its inputs as the numbers they are. */
function check(id: string): { inputs: Record<string, number & number[] & number[][]>, expected: number[], tolerance: number[] } {
  const entry = checks.get(id)
  if (!entry) throw new Error(`no check ${id}`)
  const list = (value: number | number[]) => Array.isArray(value) ? value : [value]
  return { inputs: entry.inputs as Record<string, number & number[] & number[][]>, expected: list(entry.expected.value), tolerance: list(entry.expected.tolerance) }
}

/** Holds computed values to a check, each within its own tolerance. */
function hold(id: string, ...values: number[]): void {
  const { expected, tolerance } = check(id)
  expect(values).toHaveLength(expected.length)
  values.forEach((value, i) => expect(Math.abs(value - (expected[i] as number)), `${id}[${i}]: ${value}`).toBeLessThanOrEqual(tolerance[i] ?? tolerance[0] ?? 0))
}

/** A column of one of the data sets among the checks. */
function column(id: string, name: string): number[] {
  return check(id).inputs[name] as number[]
}

describe('mean of readings', () => {
  it('adds scatter and resolution in quadrature', () => {
    // Worked by hand: s² = 7/30000, so u_A² = 7/90000; u_B² = 0.005²/3 = 1/120000; the sum is 31/360000.
    expect(meanOfReadings([41.98, 42.01, 42], 0.01).standardUncertainty).toBeCloseTo(Math.sqrt(31 / 360_000), 10)
  })
  it('keeps its digits when the readings share many of them', () => {
    expect(meanOfReadings([1e8 + 1, 1e8 + 2, 1e8 + 3], 1e-9).standardUncertainty).toBeCloseTo(1 / Math.sqrt(3), 9)
  })
  it('refuses one reading, a reading that is none and a resolution of nothing', () => {
    expect(() => meanOfReadings([1], 0.01)).toThrow(RangeError)
    expect(() => meanOfReadings([1, Number.NaN], 0.01)).toThrow(RangeError)
    expect(() => meanOfReadings([1, 2], 0)).toThrow(RangeError)
  })
  it('gives the mean, spread and standard uncertainty of the twenty thermometer readings (gum-typeA-*)', () => {
    const readings = column('ds-gum-table1', 't')
    const mean = meanOfReadings(readings, 1e-9)
    hold('gum-typeA-mean', mean.value)
    hold('gum-typeA-s', mean.standardDeviation)
    hold('gum-typeA-smean', mean.standardUncertainty)
  })
})

describe('combination', () => {
  it('adds independent contributions in quadrature', () => {
    const { inputs } = check('gum-combine-dvm')
    hold('gum-combine-dvm', combineInQuadrature(inputs.u as number[], inputs.c as number[]))
    hold('gum-g41-uc', combineInQuadrature(check('gum-g41-uc').inputs.rel as number[]))
    // Four unit normals: exactly 2 (s1-9.2.2).
    expect(combineInQuadrature([1, 1, 1, 1])).toBe(2)
  })
  it('combines the end gauge by its sensitivities (gum-h1-uc)', () => {
    const { inputs: i } = check('gum-h1-uc')
    const parts = [i.u_ls, i.u_d, standardUncertaintyOfBounds(i.a_dalpha as number, 'rectangular'), standardUncertaintyOfBounds(i.a_dtheta as number, 'rectangular')] as number[]
    hold('gum-h1-uc', combineInQuadrature(parts, [1, 1, (i.ls_nm as number) * (i.theta as number), (i.ls_nm as number) * (i.alpha as number)]))
  })
  it.each(['gum-h1-nueff'])('finds the effective degrees of freedom from unrounded parts (%s)', (id) => {
    const { inputs } = check(id)
    const nu = inputs.nu as number[]
    hold(id, effectiveDegreesOfFreedom((inputs.u as number[]).map((u, i) => ({ standardUncertainty: u, degreesOfFreedom: nu[i] as number }))) as number)
  })
  it('takes type B as infinite, and says so when all of it is', () => {
    // By hand: 5⁴ / (3⁴/4) = 2500/81.
    expect(effectiveDegreesOfFreedom([{ standardUncertainty: 3, degreesOfFreedom: 4 }, { standardUncertainty: 4, degreesOfFreedom: null }])).toBeCloseTo(2500 / 81, 10)
    expect(effectiveDegreesOfFreedom([{ standardUncertainty: 3, degreesOfFreedom: null }])).toBeNull()
  })
  it('knows the shapes of bounds', () => {
    expect(standardUncertaintyOfBounds(1, 'trapezoid', 1)).toBeCloseTo(standardUncertaintyOfBounds(1, 'rectangular'), 12)
    expect(standardUncertaintyOfBounds(1, 'trapezoid', 0)).toBeCloseTo(standardUncertaintyOfBounds(1, 'triangular'), 12)
    // A swing of half width 1 has variance 1/2.
    expect(standardUncertaintyOfBounds(1, 'arcsine') ** 2).toBeCloseTo(0.5, 12)
    hold('gum-typeB-trap', standardUncertaintyOfBounds(1, 'trapezoid', 0.5))
    hold('gum-resolution', standardUncertaintyOfBounds((check('gum-resolution').inputs.d as number) / 2, 'rectangular'))
  })
  it('refuses contributions that are none', () => {
    expect(() => combineInQuadrature([])).toThrow(RangeError)
    expect(() => combineInQuadrature([1, Number.NaN])).toThrow(RangeError)
    expect(() => combineInQuadrature([1, -1])).toThrow(RangeError)
  })
})

describe('distributions', () => {
  it('covers what k = 1, 2 and 3 cover (gum-k2-coverage)', () => {
    hold('gum-k2-coverage', ...[1, 2, 3].map(k => 2 * normalCdf(k) - 1))
  })
  it('keeps the digits of a far tail', () => {
    // Φ(-6) = 9.865876450377e-10 (from memory of standard tables, confirmed with another program).
    expect(normalCdf(-6) / 9.865876450377e-10).toBeCloseTo(1, 9)
    expect(normalCdf(2.9999999)).toBeCloseTo(normalCdf(3.0000001), 8)
  })
  it('gives the published t factors (gum-tableG2)', () => {
    const pairs = check('gum-tableG2').inputs.pairs as unknown as [number, number][]
    hold('gum-tableG2', ...pairs.map(([p, nu]) => studentTQuantile((1 + p) / 2, nu)))
  })
  it('gives the expanded uncertainties of the worked examples', () => {
    hold('gum-g41-U95', studentTQuantile(0.975, 19) * 1.03)
    hold('gum-h1-U99', studentTQuantile(0.995, 16) * 31.669)
  })
  it('gives the one-sided z of conformance (j106-table1) and of 95 % (iso14253-guard95)', () => {
    hold('j106-table1', ...(check('j106-table1').inputs.p as number[]).map(normalQuantile))
    hold('iso14253-guard95', normalQuantile(0.95))
  })
  it('is Cauchy at one degree of freedom and closed at two', () => {
    // t with 1: 1/2 + atan(t)/π; with 2: 1/2 + t / (2 √(2 + t²)).
    for (const t of [-7, -0.3, 0, 0.2, 1, 5]) {
      expect(studentTCdf(t, 1)).toBeCloseTo(0.5 + Math.atan(t) / Math.PI, 12)
      expect(studentTCdf(t, 2)).toBeCloseTo(0.5 + t / (2 * Math.sqrt(2 + t * t)), 12)
    }
  })
})

describe('chance of conforming', () => {
  it.each(['pconform-38-38_0', 'pconform-38-38_05', 'pconform-38-38_07', 'pconform-38-38_09', 'pconform-38-38_1', 'j106-oil', 'j106-zener', 'j106-container', 'pconform-t9'])('agrees with %s', (id) => {
    const { inputs: i } = check(id)
    const limit = (value: unknown) => typeof value === 'number' ? value : null
    hold(id, chanceOfConforming(i.y as number, i.u as number, limit(i.nu), { lower: limit(i.TL), upper: limit(i.TU) }))
  })
  it('uses t below thirty degrees of freedom and the normal from there', () => {
    const limits = { lower: 37.9, upper: 38.1 }
    expect(chanceOfConforming(38.07, 0.02, 30, limits)).toBe(chanceOfConforming(38.07, 0.02, null, limits))
    expect(chanceOfConforming(38.07, 0.02, 29, limits)).toBeLessThan(chanceOfConforming(38.07, 0.02, 30, limits))
  })
  it('reads the handbook\'s throat: 36.80, 36.90 and 36.95 on 41.00 against 90.0 %', () => {
    // Handbook 3.1: P(over 90.0) = 0.001, 0.50 and 0.945; U of the ratio 0.15.
    const over = (throat: number) => 1 - chanceOfConforming(100 * throat / 41, 50 * (throat / 41) * Math.hypot(0.06 / throat, 0.02 / 41), null, { lower: null, upper: 90 })
    expect(over(36.9)).toBeCloseTo(0.5, 6)
    expect(over(36.8)).toBeCloseTo(0.001, 3)
    expect(over(36.95)).toBeCloseTo(0.945, 2)
  })
  it('refuses limits the wrong way round and a doubt of nothing', () => {
    expect(() => chanceOfConforming(1, 1, null, { lower: 2, upper: 1 })).toThrow(RangeError)
    expect(() => chanceOfConforming(1, 0, null, { lower: 0, upper: 2 })).toThrow(RangeError)
    expect(() => chanceOfConforming(Number.NaN, 1, null, { lower: 0, upper: 2 })).toThrow(RangeError)
  })
})

describe('lines', () => {
  it('fits the thermometer correction (gum-h3-*)', () => {
    const line = leastSquaresLine(column('ds-gum-h3', 't'), column('ds-gum-h3', 'b'), 20)
    hold('gum-h3-fit', line.intercept, line.slope)
    hold('gum-h3-u', line.interceptUncertainty, line.slopeUncertainty, line.correlation, line.residualStandardDeviation)
  })
  it('is not moved by one bad point in nine', () => {
    const x = [0, 1, 2, 3, 4, 5, 6, 7, 8]
    const line = theilSenLine(x, x.map(value => value === 4 ? 100 : 3 + 2 * value))
    expect(line.slope).toBe(2)
    expect(line.intercept).toBe(3)
    expect(line.scatter).toBe(0)
  })
  it('refuses points at one x', () => {
    expect(() => theilSenLine([1, 1, 1], [1, 2, 3])).toThrow(RangeError)
    expect(() => leastSquaresLine([1, 1, 1], [1, 2, 3])).toThrow(RangeError)
  })
})

it('takes the middle, and pools spread over groups with means of their own', () => {
  expect(median([3, 1, 2])).toBe(2)
  expect(median([4, 1, 3, 2])).toBe(2.5)
  // By hand: (0.5 + 2) / 2 with one degree of freedom each.
  expect(pooledStandardDeviation([[1, 2], [10, 12], [5]])).toEqual({ standardDeviation: Math.sqrt(1.25), degreesOfFreedom: 2 })
  expect(() => pooledStandardDeviation([[1], [2]])).toThrow(RangeError)
})
