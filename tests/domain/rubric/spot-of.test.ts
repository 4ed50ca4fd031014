import { expect, it } from 'vitest'
import { sameSpot } from '#shared/domain/rubric/same-spot'
import { spotOf } from '#shared/domain/rubric/spot-of'
import { rubric } from './school'

it('puts the parts of a spot into the words of the wants', () => {
  // Every one of these is a place some criterion of the rubric wants.
  const places = new Set(rubric.stages.flatMap(stage => stage.criteria).flatMap(criterion => criterion.wants).flatMap(want => want.places ?? []))
  const given = [
    [{ clock: '12' }, '12'], [{ clock: '12:00' }, '12'], [{ clock: '01:30' }, '1:30'], [{ clock: '3 o\'clock' }, '3'],
    [{ direction: '12-6' }, '12-6'], [{ direction: '12-6', spot: 'upper' }, '12-6 upper'],
    [{ spot: 'pushrod fore', station: 20, height: -8 }, 'pushrod fore, station 20, height -8'], [{ spot: 'pushrod aft', station: 40, height: 8 }, 'pushrod aft, station 40, height +8'],
    [{ spot: 'pushrod aft, station 40, height +8', station: 40, height: 8 }, 'pushrod aft, station 40, height +8'],
    [{ spot: ' bowl,  fore ' }, 'bowl, fore'],
  ] as const
  for (const [parts, spot] of given) {
    expect(spotOf(parts)).toBe(spot)
    expect(places.has(spot)).toBe(true)
  }
  expect(spotOf({ station: 30 })).toBe('station 30')
  expect(spotOf({})).toBeNull()
  expect(spotOf({ spot: '  ' })).toBeNull()
  expect(() => spotOf({ station: Number.NaN })).toThrow(RangeError)
})

it('knows one spot under different hands', () => {
  expect(sameSpot('Bowl ,fore', 'bowl, fore')).toBe(true)
  expect(sameSpot('height −8', 'height -8')).toBe(true)
  expect(sameSpot('12:00', '12')).toBe(true)
  expect(sameSpot('1:30', '10:30')).toBe(false)
  expect(sameSpot(null, '12')).toBe(false)
  expect(sameSpot(null, null)).toBe(true)
})

it.each([
  ['roof, fore', ['roof,fore', 'roof ,fore', 'roof ,  fore', ' roof, fore', 'roof, fore ', 'ROOF, Fore', 'roof,\tfore', 'roof,\u00a0fore']],
  ['1:30', ['01:30', ' 1:30', '1:30\n']],
  ['12', ['12:00', '12 ', ' 12:00']],
  ['height -8', ['height \u22128', 'height  -8', 'Height \u20138']],
])('knows %s however it is written, whichever of the two is', (spot, ways) => {
  for (const way of ways) expect([sameSpot(way, spot), sameSpot(spot, way)], JSON.stringify(way)).toEqual([true, true])
  for (const way of ways) expect(sameSpot(way, `${spot} upper`), JSON.stringify(way)).toBe(false)
})
