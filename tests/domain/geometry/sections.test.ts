import { describe, expect, it } from 'vitest'
import { areaChanges } from '#shared/domain/geometry/area-changes'
import type { Section } from '#shared/domain/geometry/assert-sections'
import { pinch } from '#shared/domain/geometry/pinch'
import { pinchByDraws } from '#shared/domain/geometry/pinch-by-draws'
import { sectionVolume } from '#shared/domain/geometry/section-volume'
import { seededNormal } from '#shared/domain/rubric/compute/seeded-normal'
import { casting } from '../rubric/school'

const card = casting('D').intake_port
const sections = (areas: readonly number[], to = areas.length): Section[] => areas.slice(0, to).map((areaMm2, index) => ({ stationMm: card.stations[index] as number, areaMm2 }))
/** Without guide and throat, which are the bowl. */
const received = sections(card.area_received, 6)
const target = sections(card.area_target, 6)

describe('the pinch', () => {
  it('is the vertex of the parabola through the least section and its neighbours', () => {
    // Handbook 8.1: received 790 mm2 at 30.9 mm, target 913 at 33.5.
    expect(pinch(received).areaMm2).toBeCloseTo(790, 0)
    expect(pinch(received).stationMm).toBeCloseTo(30.9, 1)
    expect(pinch(target).areaMm2).toBeCloseTo(913, 0)
    expect(pinch(target).stationMm).toBeCloseTo(33.5, 1)
  })
  it('is the section itself where the port narrows to its end', () => {
    const narrowing = sections([900, 850, 800])
    expect(pinch(narrowing)).toMatchObject({ areaMm2: 800, stationMm: 30, fitted: false })
    expect(pinch(narrowing).areaUncertainty).toBeCloseTo(8, 10)
  })
  it('has a doubt that drawing the sections agrees with', () => {
    const carried = pinch(received)
    const drawn = pinchByDraws(received, seededNormal(7), 4000)
    // Both are one standard uncertainty; four thousand draws know it to about one per cent, and the fit is nearly linear.
    expect(drawn.areaUncertainty / carried.areaUncertainty).toBeGreaterThan(0.93)
    expect(drawn.areaUncertainty / carried.areaUncertainty).toBeLessThan(1.07)
    expect(drawn.stationUncertainty / carried.stationUncertainty).toBeGreaterThan(0.9)
    expect(drawn.stationUncertainty / carried.stationUncertainty).toBeLessThan(1.1)
  })
  it('draws the same doubt from the same seed', () => {
    expect(pinchByDraws(received, seededNormal(3), 50)).toEqual(pinchByDraws(received, seededNormal(3), 50))
    expect(pinchByDraws(received, seededNormal(3), 50)).not.toEqual(pinchByDraws(received, seededNormal(4), 50))
  })
  it('refuses sections no port has', () => {
    expect(() => pinch(received.slice(0, 2))).toThrow(RangeError)
    expect(() => pinch([...received].reverse())).toThrow(RangeError)
    expect(() => pinch(received.map((section, index) => index === 2 ? { ...section, areaMm2: Number.NaN } : section))).toThrow(RangeError)
    expect(() => pinchByDraws(received, seededNormal(1), 1_000_000)).toThrow(RangeError)
  })
})

describe('area change and cone', () => {
  it('go by the neighbouring sections', () => {
    // School's worked sums: received -5.1, -8.5, 7.6, 1.9, -3.3 % per 10 mm; cones -5.3, -8.5, 6.7, 1.8, -3.3 degrees.
    const changes = areaChanges(received)
    const percents = [-5.1, -8.5, 7.6, 1.9, -3.3]
    const cones = [-5.3, -8.5, 6.7, 1.8, -3.3]
    expect(changes).toHaveLength(5)
    changes.forEach((change, index) => {
      expect(change.percentPer10Mm).toBeCloseTo(percents[index] as number, 1)
      expect(Math.abs(change.coneDeg - (cones[index] as number))).toBeLessThan(0.06)
    })
  })
})

describe('the volume of a port', () => {
  it('is the trapezium sum of its sections', () => {
    // Casting card and handbook 8.17: 82.4 and 90.4 cc.
    expect(sectionVolume(sections(card.area_received))).toBeCloseTo(82.4, 1)
    expect(sectionVolume(sections(card.area_target))).toBeCloseTo(90.4, 1)
  })
})
