import { describe, expect, it } from 'vitest'
import { daySpan } from '#shared/contract/day-span'
import { shortDay } from '#shared/contract/short-day'
import { freeWords } from '~/components/places/free-words'
import { readPounds, typedPounds } from '~/components/places/read-pounds'
import { timeLeft } from '~/components/places/time-left'

const minute = 60_000
// Counted by hand.
describe('timeLeft', () => {
  it('counts down in words, never above what is left', () => {
    expect(timeLeft(30 * minute)).toBe('30 minutes')
    expect(timeLeft(30 * minute - 1)).toBe('29 minutes')
    expect(timeLeft(minute)).toBe('1 minute')
    expect(timeLeft(59_999)).toBe('less than a minute')
    expect(timeLeft(65 * minute)).toBe('1 hour 5 minutes')
    expect(timeLeft(48 * 60 * minute)).toBe('2 days')
    expect(timeLeft(47 * 60 * minute + 59 * minute)).toBe('1 day 23 hours')
    expect(timeLeft(24 * 60 * minute + 7 * minute)).toBe('1 day')
  })
  it('says nothing when nothing is left, or when it is no time', () => {
    expect(timeLeft(0)).toBeNull()
    expect(timeLeft(-1)).toBeNull()
    expect(timeLeft(Number.NaN)).toBeNull()
  })
})

describe('readPounds', () => {
  it('reads pounds and pence by their digits', () => {
    expect(readPounds('350')).toBe(35_000)
    expect(readPounds('£2,100.00')).toBe(210_000)
    expect(readPounds(' 0.29 ')).toBe(29)
    expect(readPounds('1.5')).toBe(150)
    expect(readPounds('1.15')).toBe(115)
  })
  it('takes nothing that is not plainly an amount', () => {
    for (const text of ['', '-5', '1e3', 'NaN', '1.234', '1,50', '12,34.00', '.5', '99999999', '5 pounds']) expect(readPounds(text), text).toBeNull()
  })
  it('writes an amount as it would be typed', () => {
    expect(typedPounds(210_005)).toBe('2100.05')
    expect(readPounds(typedPounds(29))).toBe(29)
  })
})

describe('days and free places in words', () => {
  it('writes the year once where it is one', () => {
    expect(daySpan('2026-09-21', '2026-12-18')).toBe('21 September to 18 December 2026')
    expect(daySpan('2026-11-02', '2027-01-29')).toBe('2 November 2026 to 29 January 2027')
  })
  it('keeps a day the same day, and an evening in summer on the day the shop shows', () => {
    expect(shortDay('2026-09-21')).toBe('21 Sep 2026')
    expect(shortDay('2025-06-30T23:30:00Z')).toBe('1 Jul 2025')
  })
  it('says how many are free, and how many wait when none is', () => {
    expect(freeWords({ places: 8, placesLeft: 6, waiting: 0 })).toBe('6 of 8 places free')
    expect(freeWords({ places: 8, placesLeft: 0, waiting: 3 })).toBe('No place free, 3 on the list')
    expect(freeWords({ places: 8, placesLeft: 0, waiting: 0 })).toBe('No place free')
  })
})
