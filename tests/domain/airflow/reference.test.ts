import { describe, expect, it } from 'vitest'
import { airDensity } from '#shared/domain/airflow/air-density'
import { curtainCoefficient, effectiveAreaMm2 } from '#shared/domain/airflow/curtain-coefficient'
import { idealVelocity } from '#shared/domain/airflow/ideal-velocity'
import { criticalPressureRatio, isentropicExpansionFactor } from '#shared/domain/airflow/isentropic-expansion-factor'
import { isentropicVelocity } from '#shared/domain/airflow/isentropic-velocity'
import { orificeDischargeCoefficient, orificeExpansibility, orificeMassFlow, type Taps } from '#shared/domain/airflow/orifice-plate'
import { pchip } from '#shared/domain/airflow/pchip'
import { smallestOpening } from '#shared/domain/airflow/smallest-opening'
import { convert } from '#shared/domain/units/convert'
import { loadChecks, type Check } from '../../fixtures/reference/load-checks'

const checks = loadChecks('airflow-checks')

/** A check by id. */
function get(id: string): Check & { inputs: Record<string, number> } {
  const check = checks.get(id)
  if (!check) throw new Error(`no check ${id}`)
  return check as Check & { inputs: Record<string, number> }
}

/** Holds a computed value to a check, within its own tolerance. */
function hold(id: string, value: number): void {
  const { expected } = get(id)
  expect(Math.abs(value - (expected.value as number)), `${id}: ${value} for ${String(expected.value)}`).toBeLessThanOrEqual(expected.tolerance as number)
}

/** Ids of a topic, all of them or those that fit. */
const ids = (topic: string, fits: (check: Check) => boolean = () => true) => [...checks.values()].filter(check => check.topic === topic && fits(check)).map(check => check.id)

describe('moist air', () => {
  const air = (id: string) => {
    const { t, p, h } = get(id).inputs as { t: number, p: number, h: number }
    return airDensity({ temperatureC: t, pressurePa: p, relativeHumidity: h })
  }
  it.each(['AIR-01', 'AIR-04', 'AIR-05', 'AIR-10', 'AIR-11', 'AIR-12', 'AIR-14'])('has the density of %s', id => hold(id, air(id).densityKgPerM3))
  it('shows the figures on the way', () => {
    hold('AIR-15', air('AIR-15').saturationPressurePa)
    hold('AIR-16', air('AIR-16').enhancementFactor)
    hold('AIR-17', air('AIR-17').vapourFraction)
    hold('AIR-18', air('AIR-18').compressibility)
  })
  it.each(['AIR-20', 'AIR-21', 'AIR-22'])('has the saturation pressure of the tables (%s)', (id) => {
    hold(id, airDensity({ temperatureC: get(id).inputs.t as number, pressurePa: 101_325, relativeHumidity: 0.5 }).saturationPressurePa)
  })
  it('is worth 2.8 % of flow on a warm damp day, as the handbook says', () => {
    // Handbook 4.2: 25 °C, 980 hPa, 60 % is 1.137 kg/m3.
    const { densityKgPerM3 } = airDensity({ temperatureC: 25, pressurePa: 98_000, relativeHumidity: 0.6 })
    expect(densityKgPerM3).toBeCloseTo(1.137, 3)
    expect(1 - Math.sqrt(densityKgPerM3 / 1.2041)).toBeCloseTo(0.028, 3)
  })
  it('refuses air no shop has: a unit is wrong', () => {
    expect(() => airDensity({ temperatureC: 293, pressurePa: 101_325, relativeHumidity: 0.5 })).toThrow(RangeError)
    expect(() => airDensity({ temperatureC: 20, pressurePa: 1013, relativeHumidity: 0.5 })).toThrow(RangeError)
    expect(() => airDensity({ temperatureC: 20, pressurePa: 101_325, relativeHumidity: 48 })).toThrow(RangeError)
    expect(() => airDensity({ temperatureC: Number.NaN, pressurePa: 101_325, relativeHumidity: 0.5 })).toThrow(RangeError)
  })
})

describe('jets', () => {
  it('has the ideal speeds of CMP-10 and CMP-11', () => {
    const { dp, rho } = get('CMP-10').inputs as { dp: number, rho: number }
    hold('CMP-10', idealVelocity(dp, rho))
    const i = get('CMP-11').inputs as { dp: number, p1: number, T: number, R: number, gamma: number }
    hold('CMP-11', isentropicVelocity(i.p1, i.dp, i.T, i.R, i.gamma))
  })
  it('passes 107.63 m/s at the one basis, 147.1 cfm a square inch (handbook 8)', () => {
    expect(idealVelocity(28 * 249.08891, 1.2041)).toBeCloseTo(107.63, 2)
    expect(convert(1, 'in2', 'm2') * idealVelocity(28 * 249.08891, 1.2041) / convert(1, 'cfm', 'm3/s')).toBeCloseTo(147.1, 1)
  })
  it.each(['CMP-01', 'CMP-04', 'CMP-07'])('expands as %s', (id) => {
    const { dp, p1, gamma } = get(id).inputs as { dp: number, p1: number, gamma: number }
    hold(id, isentropicExpansionFactor(p1, dp, gamma))
  })
  it.each(['CMP-05', 'CMP-08'])('overstates mass flow by %s per cent when taken as incompressible', (id) => {
    const { dp, p1, gamma } = get(id).inputs as { dp: number, p1: number, gamma: number }
    hold(id, 100 * (1 / isentropicExpansionFactor(p1, dp, gamma) - 1))
  })
  it.each(['GAS-31', 'GAS-32', 'GAS-33'])('chokes at %s', id => hold(id, criticalPressureRatio(get(id).inputs.gamma as number)))
  it.each(['TP-01', 'TP-02', 'TP-03', 'TP-04', 'TP-05'])('scales pressure by the square root (%s)', (id) => {
    const { dp1, dp2 } = get(id).inputs as { dp1: number, dp2: number }
    hold(id, idealVelocity(dp2, 1) / idealVelocity(dp1, 1))
  })
  it.each(['TP-11', 'TP-12', 'TP-13', 'TP-14'])('knows what the square root leaves out (%s)', (id) => {
    const { dp1, dp2, p1, gamma } = get(id).inputs as { dp1: number, dp2: number, p1: number, gamma: number }
    const [a, b] = [convert(dp1, 'inH2O', 'Pa'), convert(dp2, 'inH2O', 'Pa')]
    hold(id, Math.sqrt(b / a) * isentropicExpansionFactor(p1, b, gamma) / isentropicExpansionFactor(p1, a, gamma))
  })
  it('refuses a choked jet', () => {
    expect(() => isentropicExpansionFactor(101_325, 60_000)).toThrow(RangeError)
    expect(() => idealVelocity(0, 1.2)).toThrow(RangeError)
  })
})

describe('orifice plate', () => {
  const plate = (i: Record<string, number>) => ({ pipeM: i.D ?? 0.1, boreM: i.d ?? (i.beta ?? 0) * (i.D ?? 0.1), taps: String(i.taps) === 'D' ? 'D and D/2' as Taps : String(i.taps) as Taps })
  it.each(ids('orifice plate', check => check.quantity.startsWith('C') && typeof check.inputs.ReD === 'number'))('has the coefficient of %s', (id) => {
    const { inputs } = get(id)
    hold(id, orificeDischargeCoefficient(plate(inputs), inputs.ReD as number))
  })
  it.each(['ORF-07', 'ORF-08', 'ORF-09'])('has the coefficient of %s at its own flow', (id) => {
    const { inputs } = get(id)
    hold(id, orificeDischargeCoefficient(plate(inputs), 4 * (inputs.qm as number) / (Math.PI * (inputs.D as number) * (inputs.mu as number))))
  })
  it.each(ids('orifice plate', check => typeof check.inputs['p2/p1'] === 'number'))('expands as %s', (id) => {
    const { inputs } = get(id)
    hold(id, orificeExpansibility(inputs.beta as number, inputs['p2/p1'] as number, inputs.kappa as number))
  })
  it('finds flow and coefficient together (ORF-02 gas, ORF-12 water)', () => {
    const gas = get('ORF-02').inputs as Record<string, number>
    hold('ORF-02', convert(orificeMassFlow(plate(gas), { differencePa: gas.dp as number, upstreamPa: gas.p1 as number, densityKgPerM3: gas.rho1 as number, viscosityPaS: gas.mu as number, kappa: gas.kappa as number }), 'kg/s', 'kg/h'))
    const water = get('ORF-12').inputs as Record<string, number>
    hold('ORF-12', orificeMassFlow(plate(water), { differencePa: (water.p1 as number) - (water.p2 as number), upstreamPa: water.p1 as number, densityKgPerM3: water.rho1 as number, viscosityPaS: water.mu as number, kappa: water.kappa as number, incompressible: false }))
  })
})

describe('valve', () => {
  const valve = (i: Record<string, number>) => ({ seatOuterMm: i.Dv as number, stemMm: i.Ds as number, seatWidthMm: i.w as number, seatDeg: i.seat_angle as number, throatMm: i.Dp as number })
  it.each(ids('valve flow area', check => check.quantity.startsWith('minimum flow area')))('has the smallest opening of %s', (id) => {
    const { inputs } = get(id)
    hold(id, smallestOpening(valve(inputs), inputs.L as number).areaMm2)
  })
  it('joins its three ranges without a step', () => {
    const one = valve(get('VAL-01').inputs)
    for (const joint of [get('VAL-20').expected.value as number, 1.5 + Math.sqrt(((34 ** 2 - 6 ** 2) / (4 * 38.5)) ** 2 - 1.5 ** 2)]) {
      expect(smallestOpening(one, joint - 1e-7).areaMm2).toBeCloseTo(smallestOpening(one, joint + 1e-7).areaMm2, 3)
    }
  })
  it('is capped by the measured throat less the stem', () => {
    // By hand: π/4 (30² - 6²) = 678.58.
    expect(smallestOpening({ ...valve(get('VAL-01').inputs), throatMm: 30 }, 10)).toEqual({ areaMm2: Math.PI / 4 * (900 - 36), regime: 'throat' })
  })
  it('has the effective area of VAL-50, for its own air', () => {
    const { Q, dp, rho } = get('VAL-50').inputs as { Q: number, dp: number, rho: number }
    expect(dp).toBe(28)
    // The check is at 1.2 kg/m3; ours is always at 1.2041, so the area scales by the root of the densities.
    hold('VAL-50', effectiveAreaMm2(Q) * Math.sqrt(rho / 1.2041))
  })
  it('refuses what is no valve', () => {
    const one = valve(get('VAL-01').inputs)
    expect(() => smallestOpening(one, 0)).toThrow(RangeError)
    expect(() => smallestOpening({ ...one, stemMm: 38 }, 3)).toThrow(RangeError)
    expect(() => smallestOpening({ ...one, seatDeg: 0 }, 3)).toThrow(RangeError)
    expect(() => curtainCoefficient(20, Number.NaN, 1)).toThrow(RangeError)
  })
})

describe('pchip', () => {
  it.each(ids('PCHIP', check => check.inputs.f === 'exp(-x^2)'))('has the slope of %s', (id) => {
    const { x, index } = get(id).inputs as unknown as { x: number[], index: number }
    hold(id, pchip(x, x.map(value => Math.exp(-value * value))).slopes[index] as number)
  })
  it.each(ids('PCHIP', check => check.inputs.at !== undefined))('has the value of %s', (id) => {
    const { x, y, lift, flow, at } = get(id).inputs as unknown as Record<string, number[]> & { at: number }
    hold(id, pchip((x ?? lift) as number[], (y ?? flow) as number[]).at(at))
  })
  it('has the integral of INT-34', () => {
    const { lift, flow } = get('INT-34').inputs as unknown as { lift: number[], flow: number[] }
    hold('INT-34', pchip(lift, flow).integral)
  })
  it('does not guess beyond its points', () => {
    expect(() => pchip([0, 1, 2], [0, 1, 2]).at(2.001)).toThrow(RangeError)
    expect(() => pchip([0, 1, 1], [0, 1, 2])).toThrow(RangeError)
    expect(() => pchip([0, 1], [0, Number.NaN])).toThrow(RangeError)
  })
})
