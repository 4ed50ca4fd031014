import { describe, expect, it } from 'vitest'
import { computableNamed, computables, compute } from '#shared/domain/rubric/compute/compute'
import { InputsRefused } from '#shared/domain/rubric/compute/check-inputs'
import { seededNormal } from '#shared/domain/rubric/compute/seeded-normal'

function computed(name: string, given: unknown) {
  const quantity = computableNamed(name)
  if (!quantity) throw new Error(`no quantity ${name}`)
  return compute(quantity, given)
}

describe('computing by name', () => {
  it('offers each quantity once, with inputs, unit and source', () => {
    expect(computables.length).toBeGreaterThanOrEqual(25)
    expect(new Set(computables.map(one => one.name)).size).toBe(computables.length)
    for (const one of computables) {
      expect(one.inputs.length).toBeGreaterThan(0)
      expect(one.source).not.toBe('')
      expect(computableNamed(one.name)).toBe(one)
    }
    expect(computableNamed('toString')).toBeNull()
  })

  // Each expected value is one of the handbook's or of the shared check values, named beside it.
  it.each<[string, Record<string, unknown>, number, number]>([
    ['ideal-velocity', { pressurePa: 28 * 249.08891, densityKgPerM3: 1.2041 }, 107.63, 2], // handbook 8
    ['throat-share', { throatMm: [36.9], throatExpandedU: 0.06, valveMm: 41, valveExpandedU: 0.02 }, 90, 6], // handbook 3.1
    ['metal-left', { readingMm: 4.4, expandedUncertainty: 0.15, acceptLeastMm: 3.5, hardLeastMm: 3, handAllowanceMm: 0.15 }, 0.6, 9], // handbook 3.1
    ['conform-probability', { value: 13.6, standardUncertainty: 1.8, lower: 12.5, upper: 16.3 }, 0.6626, 4], // j106-oil
    ['conform-probability', { value: 38.07, standardUncertainty: 0.02, lower: 37.9, upper: 38.1, degreesOfFreedom: 9 }, 0.916067874935, 8], // pconform-t9
    ['isentropic-flow', { upstreamPa: 101325, differencePa: 6974.48948 }, 0.96242, 5], // ISO-like check beside isentropicExpansionFactor
    ['inlet-mach-index', { boreMm: 100, meanPistonSpeedMPerS: 16, meanEffectiveAreaMm2: 0.35 * Math.PI / 4 * 2500, soundSpeedMPerS: 340 }, 0.53781512605042, 9], // MCH-02
    ['mean-piston-speed', { strokeM: 0.08, revolutionsPerMinute: 6000 }, 16, 9], // MCH-01
    ['convert', { value: 1, from: 'in', to: 'mm' }, 25.4, 12], // exact
    ['compression-ratio', { sweptCc: 499.557214217927, chamberCc: 47, gasketCc: 4.1612750891287, deckCc: 1.7426414449463, dishCc: 5 }, 1 + 499.557214217927 / 57.903916534075, 6], // VOL-04
    ['pinch', { stationsMm: [0, 15, 30, 45, 60, 75], areasMm2: [980, 905, 790, 880, 905, 860] }, 789.6, 0], // handbook 8.1
    ['bend-speed-ratio', { heightMm: 26, innerRadiusMm: 6 }, 2.59, 2], // handbook 8.14
    ['smallest-opening', { seatOuterMm: 40, stemMm: 6, seatWidthMm: 1.5, seatDeg: 45, liftMm: 5 }, 460.57, 2], // valve flow area check
    ['interpolate-flow', { liftsMm: [0, 1, 2], flows: [0, 10, 20], liftMm: 1.5 }, 15, 9], // a straight line stays one
    ['plate-difference', { reading: 151.5, nominal: 150 }, 1, 9], // by hand
  ])('gives %s', (name, given, value, digits) => {
    const { value: got, trace } = computed(name, given)
    expect(got).toBeCloseTo(value, digits)
    expect(trace.length).toBeGreaterThan(0)
  })

  it('weighs the flow of sheets 01 by the lift curve', () => {
    // The school's worked sums: 73.55 cfm.
    const liftsMm = [1.27, 2.54, 3.81, 5.08, 6.35, 7.62, 8.89, 10.16, 11.43]
    const cfm28 = [22.38, 44.17, 65.16, 82.97, 97.49, 108.24, 116.4, 121.97, 125.85]
    expect(computed('lift-weighted-flow', { liftsMm, cfm28, maxLiftMm: 10.8 }).value).toBeCloseTo(73.55, 1)
  })

  it('names every input that is wrong', () => {
    const issues = (given: unknown) => {
      try {
        computed('pinch-by-draws', given)
      }
      catch (error) {
        if (error instanceof InputsRefused) return error.issues.map(one => one.path)
        throw error
      }
      return []
    }
    expect(issues({ stationsMm: [0, 10, 20], areasMm2: [900, 800, 'x'], draws: 1e9, seed: 1.5, more: 1 })).toEqual(['more', 'areasMm2.2', 'draws', 'seed'])
    expect(issues({})).toEqual(['stationsMm', 'areasMm2', 'draws', 'seed'])
    expect(issues(null)).toEqual([''])
    expect(issues({ stationsMm: Array.from({ length: 100_000 }, (_, n) => n), areasMm2: [900, 900], draws: 100, seed: 1 })).toEqual(['stationsMm'])
    expect(issues({ stationsMm: [0, Number.NaN], areasMm2: [900, Infinity], draws: 100, seed: 1 })).toEqual(['stationsMm.1', 'areasMm2.1'])
  })

  it('throws a RangeError, never gives NaN, whatever it is given within bounds', () => {
    const normal = seededNormal(11)
    const share = () => Math.abs(normal() % 1)
    let answers = 0
    for (const quantity of computables) {
      for (let n = 0; n < 40; n++) {
        const given = Object.fromEntries(quantity.inputs.filter(input => !input.optional || n % 2 === 0).map((input) => {
          const pick = (least: number, most: number) => n === 0 ? least : n === 1 ? most : least + share() * (Math.min(most, least + 100) - least)
          switch (input.kind) {
            case 'number': return [input.name, pick(input.least, input.most)]
            case 'integer': return [input.name, Math.round(pick(input.least, Math.min(input.most, 200)))]
            case 'numbers': return [input.name, Array.from({ length: Math.max(input.fewest, 3) }, () => pick(input.least, input.most)).sort((a, b) => a - b)]
            case 'choice': return [input.name, input.choices[n % input.choices.length]]
            case 'text': return [input.name, ['mm', 'in', 'cfm', 'nonsense'][n % 4]]
          }
        }))
        try {
          const { value, standardUncertainty, trace } = compute(quantity, given)
          answers += 1
          for (const figure of [...[value].flat(), standardUncertainty ?? 0]) expect(Number.isFinite(figure)).toBe(true)
          expect(JSON.stringify(trace)).not.toMatch(/NaN|undefined|Infinity/)
        }
        catch (error) {
          expect(error).toBeInstanceOf(RangeError)
        }
      }
    }
    expect(answers).toBeGreaterThan(500)
  })
})
