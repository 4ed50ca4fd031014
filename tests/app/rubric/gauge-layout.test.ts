import { describe, expect, it } from 'vitest'
import { layoutGauge } from '~/components/rubric/gauge-layout'

// Bands as in the rubric: W-01 (seat land), W-06 (bowl wall), W-03 (throat share).
const land = { lo: 1.52, hi: 1.78, loKind: 'no-return', hiKind: 'put-right', softLo: 1.4, softHi: 1.52 }
const wall = { lo: 4, hi: null, loKind: 'no-return', hiKind: 'natural', softLo: 3.5, softHi: 4 }
const leak = { lo: 0, hi: 0.8, loKind: 'natural', hiKind: 'put-right', softLo: 0.8, softHi: 1.5 }

/** A scale is straight: places in proportion to values. Worked from two limits of the same drawing, not from the code's own from and to. */
const proportion = (value: number, lo: number, hi: number, xLo: number, xHi: number) => xLo + (value - lo) / (hi - lo) * (xHi - xLo)

describe('layoutGauge', () => {
  it('puts the reading, its doubt and the guarded end where the limits say they are', () => {
    const drawing = layoutGauge({ value: 1.62, expandedUncertainty: 0.08, band: land, must: true }, 300, 10)
    const [lo, hi] = drawing.limits
    const at = (value: number) => proportion(value, 1.52, 1.78, lo!.x, hi!.x)
    expect(drawing.band).toEqual({ from: lo!.x, to: hi!.x })
    expect(drawing.reading!.x).toBeCloseTo(at(1.62), 6)
    expect(drawing.reading!.doubt!.from).toBeCloseTo(at(1.54), 6)
    expect(drawing.reading!.doubt!.to).toBeCloseTo(at(1.70), 6)
    expect(drawing.guarded).toHaveLength(1)
    expect(drawing.guarded[0]!.from).toBeCloseTo(at(1.52), 6)
    expect(drawing.guarded[0]!.to).toBeCloseTo(at(1.60), 6)
    expect(drawing.soft).toHaveLength(1)
    expect(drawing.soft[0]!.from).toBeCloseTo(at(1.40), 6)
    expect(drawing.soft[0]!.to).toBeCloseTo(at(1.52), 6)
  })
  it('puts ticks on the same scale, every fifth one long', () => {
    const { ticks, limits } = layoutGauge({ value: 1.62, expandedUncertainty: 0.08, band: land, must: true }, 300, 10)
    for (const tick of ticks) expect(tick.x).toBeCloseTo(proportion(tick.value, 1.52, 1.78, limits[0]!.x, limits[1]!.x), 6)
    const long = ticks.map((tick, at) => tick.long ? at : -1).filter(at => at >= 0)
    expect(long.length).toBeGreaterThan(1)
    expect(new Set(long.slice(1).map((at, before) => at - long[before]!))).toEqual(new Set([5]))
  })
  it('guards nothing on a criterion that is no must, nor at an end that can be put right', () => {
    expect(layoutGauge({ value: 1.62, expandedUncertainty: 0.08, band: land, must: false }, 300, 10).guarded).toEqual([])
    expect(layoutGauge({ value: 0.2, expandedUncertainty: 0.2, band: leak, must: true }, 300, 10).guarded).toEqual([])
  })
  it('guards an upper no-return end on its inside', () => {
    const throat = { lo: 87.5, hi: 90, loKind: 'put-right', hiKind: 'no-return', softLo: 86, softHi: 87.5 }
    const { guarded, limits } = layoutGauge({ value: 89.9, expandedUncertainty: 0.15, band: throat, must: true }, 300, 10)
    expect(guarded[0]!.to).toBeCloseTo(limits[1]!.x, 6)
    expect(guarded[0]!.from).toBeCloseTo(proportion(89.85, 87.5, 90, limits[0]!.x, limits[1]!.x), 6)
  })
  it('lets a band with no upper end run off the rule', () => {
    const { band, limits } = layoutGauge({ value: 3.31, expandedUncertainty: 0.15, band: wall, must: true }, 300, 10)
    expect(band!.to).toBe(290)
    expect(limits.map(limit => limit.text)).toEqual(['4'])
  })
  it('starts a leak at nought, below which there is nothing', () => {
    const { limits, ticks } = layoutGauge({ value: 0.2, expandedUncertainty: 0.2, band: leak, must: true }, 300, 10)
    expect(limits[0]!.x).toBe(10)
    expect(ticks[0]!.value).toBe(0)
  })
  it('draws a reading far outside as off the end instead of shrinking the band to nothing', () => {
    const drawing = layoutGauge({ value: 36.4, expandedUncertainty: 0.15, band: wall, must: true }, 300, 10)
    expect(drawing.reading).toEqual({ x: 290, doubt: null, off: 'above' })
    expect(drawing.band!.to - drawing.band!.from).toBeGreaterThan(60)
  })
  it('keeps everything on the rule for every band of one, two or no ends', () => {
    const bands = [land, wall, leak, null, { lo: null, hi: 18, loKind: 'natural', hiKind: 'put-right', softLo: 18, softHi: 22 }, { lo: 0, hi: 0, loKind: 'natural', hiKind: 'no-return', softLo: null, softHi: null }, { lo: -0.2, hi: 0.2, loKind: 'put-right', hiKind: 'put-right', softLo: -0.35, softHi: 0.35 }]
    for (const band of bands) {
      for (const value of [-3, 0, 0.4, 1.6, 17, 400, null]) {
        const drawing = layoutGauge({ value, expandedUncertainty: 0.15, band, must: true }, 300, 10)
        const places = [...drawing.ticks.map(tick => tick.x), ...[drawing.band, ...drawing.soft, ...drawing.guarded, drawing.reading?.doubt].flatMap(span => span ? [span.from, span.to] : []), ...(drawing.reading ? [drawing.reading.x] : [])]
        expect(places.length).toBeGreaterThan(2)
        for (const place of places) {
          expect(place).toBeGreaterThanOrEqual(10 - 1e-9)
          expect(place).toBeLessThanOrEqual(290 + 1e-9)
        }
      }
    }
  })
  it('refuses what is not a number', () => {
    expect(() => layoutGauge({ value: Number.NaN, expandedUncertainty: 0.1, band: land, must: true }, 300, 10)).toThrow(RangeError)
  })
})
