import { expect, it } from 'vitest'
import { createClock } from '#server/adapters/clock/clock'
import { schoolTimeOf } from '#server/services/school/school-time-of'

// The demo stands in March while the phones are in December.
const clock = createClock({ demoNow: '2026-03-26T19:40:00Z', seededAt: '2026-12-01T12:00:00Z' }, () => new Date('2026-12-01T12:30:00Z'))
const told = (at: string) => schoolTimeOf({ clock }, at)?.toISOString() ?? null

it('takes a phone\'s real time as so long ago', () => {
  expect(told('2026-12-01T12:00:00Z')).toBe('2026-03-26T19:40:00.000Z')
})
it('takes a time of the school\'s own date as it is', () => {
  expect(told('2026-03-26T18:00:00Z')).toBe('2026-03-26T18:00:00.000Z')
})
it('forgives a clock that is minutes ahead, and takes no time that is still to come', () => {
  expect(told('2026-12-01T12:34:00Z')).toBe('2026-03-26T20:10:00.000Z')
  expect(told('2026-12-01T12:36:00Z')).toBeNull()
})
