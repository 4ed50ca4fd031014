import { expect, it } from 'vitest'
import { createClock } from '../../../server/adapters/clock/clock'

it('lives in real time where there is no demo', () => {
  const real = () => new Date('2026-12-01T08:00:00Z')
  expect(createClock(null, real).schoolNow()).toEqual(real())
})
it('stands at the demo\'s date and moves on with the time since seeding', () => {
  let now = new Date('2026-12-01T08:00:00Z')
  const clock = createClock({ demoNow: '2026-03-26T19:40:00Z', seededAt: '2026-12-01T08:00:00Z' }, () => now)
  expect(clock.schoolNow().toISOString()).toBe('2026-03-26T19:40:00.000Z')
  now = new Date('2026-12-02T09:30:00Z')
  // A day and an hour and a half later, by hand.
  expect(clock.schoolNow().toISOString()).toBe('2026-03-27T21:10:00.000Z')
  expect(clock.now()).toEqual(now)
})
it('refuses an instant nobody can read', () => {
  expect(() => createClock({ demoNow: 'yesterday', seededAt: '2026-12-01T08:00:00Z' })).toThrow(RangeError)
})
