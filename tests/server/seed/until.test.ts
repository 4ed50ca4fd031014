import { expect, it } from 'vitest'
import { demoInstant } from '../../../scripts/seed/demo-instant'
import { readUntil } from '../../../scripts/seed/read-until'
import { schoolInstant } from '../../../scripts/seed/school-instant'
import { steadyNoise } from '../../../scripts/seed/steady-noise'
import { Problem } from '../../../scripts/lib/problem'

it('reads an instant by the clock on the school\'s wall, in winter and in summer time', () => {
  // Clocks in London went forward on 29 March 2026 at 01:00 UTC and go back on 25 October (last Sundays of both months).
  expect(schoolInstant('2026-03-26T19:40').toISOString()).toBe('2026-03-26T19:40:00.000Z')
  expect(schoolInstant('2026-04-14T19:00').toISOString()).toBe('2026-04-14T18:00:00.000Z')
  expect(schoolInstant('2026-03-29T00:30').toISOString()).toBe('2026-03-29T00:30:00.000Z')
  expect(schoolInstant('2026-03-29T02:30').toISOString()).toBe('2026-03-29T01:30:00.000Z')
  expect(schoolInstant('2026-04-14T19:00Z').toISOString()).toBe('2026-04-14T19:00:00.000Z')
  expect(schoolInstant('2026-04-14T19:00+02:00').toISOString()).toBe('2026-04-14T17:00:00.000Z')
  expect(schoolInstant('2026-02-10').toISOString()).toBe('2026-02-10T00:00:00.000Z')
})

it.each(['', 'tomorrow', '2026-02-30T10:00', '2026-13-01T10:00', '2026-03-26T25:00', '26.03.2026', '2026-03-26T19:40 or so'])('does not take %j for an instant', (text) => {
  expect(() => schoolInstant(text)).toThrow(RangeError)
})

it('takes --until and nothing else', () => {
  expect(readUntil([], demoInstant)).toEqual(schoolInstant('2026-03-26T19:40'))
  expect(readUntil(['--until', '2026-03-02T12:00'], demoInstant)).toEqual(schoolInstant('2026-03-02T12:00'))
  for (const args of [['--until'], ['--when', '2026-03-02T12:00'], ['--until', '2026-03-02', '12:00'], ['--until', 'soon']]) expect(() => readUntil(args, demoInstant), args.join(' ')).toThrow(Problem)
})

it('scatters alike every time, evenly, and differently at every spot', () => {
  const draws = Array.from({ length: 4000 }, (_, index) => steadyNoise('DNK-0147', 'seat-land', index))
  expect(steadyNoise('DNK-0147', 'seat-land', 7)).toBe(draws[7])
  expect(Math.min(...draws)).toBeGreaterThanOrEqual(-1)
  expect(Math.max(...draws)).toBeLessThanOrEqual(1)
  // Mean and variance of a uniform distribution on -1 to 1 are 0 and 1/3; four standard errors of 4000 draws.
  const mean = draws.reduce((sum, one) => sum + one, 0) / draws.length
  expect(Math.abs(mean)).toBeLessThan(4 * Math.sqrt(1 / 3 / 4000))
  expect(draws.reduce((sum, one) => sum + (one - mean) ** 2, 0) / draws.length).toBeCloseTo(1 / 3, 1)
})
