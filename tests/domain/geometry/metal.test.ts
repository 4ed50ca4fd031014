import { describe, expect, it } from 'vitest'
import { bendSpeedRatio } from '#shared/domain/geometry/bend-speed-ratio'
import { chanceUnder } from '#shared/domain/geometry/chance-under'
import { compressionRatio, discVolume } from '#shared/domain/geometry/compression-ratio'
import { landInnerDiameter } from '#shared/domain/geometry/land-inner-diameter'
import { metalLeft } from '#shared/domain/geometry/metal-left'
import { rowPlot } from '#shared/domain/geometry/row-plot'
import { throatNetArea } from '#shared/domain/geometry/throat-net-area'
import { throatShare } from '#shared/domain/geometry/throat-share'
import { wallSpots } from '#shared/domain/geometry/wall-spots'
import { casting } from '../rubric/school'

const wall = { expandedUncertainty: 0.15, acceptLeastMm: 3.5, hardLeastMm: 3, handAllowanceMm: 0.15 }

describe('metal left', () => {
  it('is the reading less U, accept least and hand, rounded down', () => {
    // Handbook 3.1: 4.40 leaves 0.6, stop at 3.5; 8.9: 4.26 leaves 0.4.
    expect(metalLeft({ ...wall, readingMm: 4.4 })).toMatchObject({ takeMm: 0.6, stopAtMm: 3.5 })
    expect(metalLeft({ ...wall, readingMm: 4.26 }).takeMm).toBe(0.4)
    expect(metalLeft({ ...wall, readingMm: 4.4 }).chanceUnderHardLeast).toBeLessThan(0.00001)
  })
  it('is never under nothing', () => {
    expect(metalLeft({ ...wall, readingMm: 3.6 }).takeMm).toBe(0)
  })
  it('shows no figure where the chance of a wall under the hard least is over 2 %', () => {
    // 3.10 read, least 3.0, u 0.075: the chance is the normal tail beyond 1.333, 0.0912 (tables).
    const thin = metalLeft({ ...wall, readingMm: 3.1 })
    expect(thin.takeMm).toBeNull()
    expect(thin.chanceUnderHardLeast).toBeCloseTo(0.0912, 4)
    expect(thin.stopAtMm).toBe(3.5)
  })
  it('refuses nonsense', () => {
    expect(() => metalLeft({ ...wall, readingMm: Number.NaN })).toThrow(RangeError)
    expect(() => metalLeft({ ...wall, readingMm: 4, hardLeastMm: 4 })).toThrow(RangeError)
  })
})

describe('the chance of a wall under its hard least', () => {
  // Handbook 8.9 and the school's worked sums: mu 4.26 and 4.20, s 0.075, hand 0.15, least 3.0.
  it.each([[4.26, 1.0, 0.0605], [4.26, 1.4, 0.7981], [4.2, 0.6, 0.0002], [4.2, 1.0, 0.1165], [4.2, 1.4, 0.8835]])('of %f mm after a cut of %f is %f', (wallMm, cutMm, chance) => {
    expect(chanceUnder({ wallMm, cutMm, standardUncertainty: 0.075, handMm: 0.15, hardLeastMm: 3 })).toBeCloseTo(chance, 3)
  })
  it('does not count the hand where nothing is cut', () => {
    const still = { wallMm: 3.15, cutMm: 0, standardUncertainty: 0.075, hardLeastMm: 3 }
    expect(chanceUnder({ ...still, handMm: 0.15 })).toBe(chanceUnder({ ...still, handMm: 0 }))
  })
})

describe('the row plot', () => {
  it('sees cores that moved', () => {
    // Handbook 8.9: Dele's 4.7, 4.4, 4.1, 3.6. Slope by hand: (-1.5 x 4.7 - 0.5 x 4.4 + 0.5 x 4.1 + 1.5 x 3.6) / 5 = -0.36.
    const row = rowPlot([4.7, 4.4, 4.1, 3.6].map((leastMm, index) => ({ cylinder: index + 1, leastMm })), 0.15)
    expect(row.slopeMm).toBeCloseTo(-0.36, 10)
    expect(row.coresMoved).toBe(true)
    expect(row.at(4)).toBeCloseTo(3.66, 10)
  })
  it('calls a slope inside the gauge\'s doubt no slope, however straight the points lie', () => {
    expect(rowPlot([4.4, 4.38, 4.36, 4.34].map((leastMm, index) => ({ cylinder: index + 1, leastMm })), 0.15).coresMoved).toBe(false)
  })
})

describe('throat and land', () => {
  it('is a share of the valve with its doubt', () => {
    // Handbook 3.5: 36.5/41.0 = 89.0 ± 0.15; U 0.06 and 0.02.
    const share = throatShare([36.48, 36.52, 36.5].map(mm => ({ mm, standardUncertainty: 0.03 })), { mm: 41, standardUncertainty: 0.01 })
    expect(share.value).toBeCloseTo(89.02, 2)
    expect(2 * (share.standardUncertainty ?? 0)).toBeCloseTo(0.15, 2)
  })
  it('leaves the throat less its stem, and the land inside its seat', () => {
    // Casting card: 33.6 and 36.5 less an 8.0 stem are 836 and 996 mm2; handbook 3.5: 40.50 - 2(1.65)(0.7071) = 38.17.
    expect(throatNetArea(33.6, 8)).toBeCloseTo(836, 0)
    expect(throatNetArea(36.5, 8)).toBeCloseTo(996, 0)
    expect(landInnerDiameter(40.5, 1.65, 45)).toBeCloseTo(38.17, 2)
    expect(() => landInnerDiameter(40.5, 40, 45)).toThrow(RangeError)
  })
})

describe('volumes and bends', () => {
  it('gives the school\'s compression ratios', () => {
    // Handbook 8.12: 40.7 and 41.9 cc are 9.03 and 8.86.
    const with_ = (chamberCc: number) => compressionRatio({ sweptCc: 443.3, chamberCc, gasketCc: discVolume(85.5, 1.1), deckCc: discVolume(84, 0.4), dishCc: 6 })
    expect(with_(40.7)).toBeCloseTo(9.026, 3)
    expect(with_(41.9)).toBeCloseTo(8.855, 3)
  })
  it('gives the inside speed of a bend', () => {
    // Handbook 8.14: 26 mm high, inner radius 6.0 and 9.5: 2.59 and 2.08.
    expect(bendSpeedRatio(26, 6)).toBeCloseTo(2.59, 2)
    expect(bendSpeedRatio(26, 9.5)).toBeCloseTo(2.08, 2)
  })
})

describe('the wall map of a casting card', () => {
  it('has every spot in the words of the wants, at the side its wall belongs to', () => {
    const spots = wallSpots(casting('D'))
    expect(spots.filter(one => one.wall === 'pushrod')).toHaveLength(18)
    expect(spots).toContainEqual({ wall: 'pushrod', side: 'intake', spot: 'pushrod fore, station 20, height -8' })
    expect(spots).toContainEqual({ wall: 'pushrod', side: 'intake', spot: 'pushrod aft, station 40, height +8' })
    expect(spots).toContainEqual({ wall: 'intake_roof', side: 'intake', spot: 'roof, station 40' })
    expect(spots).toContainEqual({ wall: 'exhaust_bowl_cylinder_side', side: 'exhaust', spot: 'bowl, fore' })
    expect(wallSpots(casting('W')).filter(one => one.spot.startsWith('fin root')).map(one => one.side)).toEqual(['intake', 'intake', 'intake', 'exhaust', 'exhaust', 'exhaust'])
  })
})
