import { expect, it } from 'vitest'
import { balanceDueOn } from '#shared/domain/money/balance-due-on'
import { dayAfter, daysBetween } from '#shared/domain/money/calendar-days'
import { courseWeeks, weeksBegun } from '#shared/domain/money/course-weeks'
import { plainAmount } from '#shared/domain/money/plain-amount'
import { refundTable } from '#shared/domain/money/refund-table'

it('counts days of the calendar over months, years, leap days and changes of the clock', () => {
  // Handbook 5.4: 40 days before the start, 73 after paying.
  expect(daysBetween('2025-08-13', '2025-09-22')).toBe(40)
  expect(daysBetween('2025-06-01', '2025-08-13')).toBe(73)
  expect(daysBetween('2024-02-28', '2024-03-01')).toBe(2)
  expect(daysBetween('2026-03-28', '2026-03-30')).toBe(2)
  expect(daysBetween('2026-01-01', '2025-12-31')).toBe(-1)
  expect(dayAfter('2026-09-21', -28)).toBe('2026-08-24')
  expect(dayAfter('2023-12-31', 60)).toBe('2024-02-29')
})

it('counts the courses of the school as the handbook does, 13 weeks', () => {
  // content/school/scenario.json: Bramble, Alder and Cinder, 13 weeks each.
  expect(courseWeeks('2025-09-22', '2025-12-19')).toBe(13)
  expect(courseWeeks('2026-02-10', '2026-05-07')).toBe(13)
  expect(courseWeeks('2026-09-21', '2026-12-18')).toBe(13)
  expect(() => courseWeeks('2026-09-21', '2026-09-20')).toThrow(RangeError)
})

it('counts the week somebody is in as used', () => {
  // Alder: 26 March 2026 is in week 7 (handbook 5.1, clock A).
  expect(weeksBegun('2026-02-10', '2026-03-26', 13)).toBe(7)
  expect(weeksBegun('2026-02-10', '2026-02-09', 13)).toBe(0)
  expect(weeksBegun('2026-02-10', '2026-02-10', 13)).toBe(1)
  expect(weeksBegun('2026-02-10', '2027-02-10', 13)).toBe(13)
})

it('lets the balance fall due 28 days before the start, or when a later deposit is paid', () => {
  // content/school/scenario.json: Callum of Bramble, due 25 August 2025.
  expect(balanceDueOn('2025-09-22')).toBe('2025-08-25')
  expect(balanceDueOn('2025-09-22', '2025-06-01')).toBe('2025-08-25')
  expect(balanceDueOn('2025-09-22', '2025-09-10')).toBe('2025-09-10')
})

it('writes amounts out to the penny', () => {
  expect([0, 5, 99, 100, 35_000, 245_000, 123_456_789, -2500].map(plainAmount)).toEqual(['0.00', '0.05', '0.99', '1.00', '350.00', '2,450.00', '1,234,567.89', '-25.00'])
  expect(() => plainAmount(0.5)).toThrow(RangeError)
})

it('says which days the table means for a start', () => {
  // Counted on a calendar of 2026 from 21 September.
  expect(refundTable({ startsOn: '2026-09-21' }).map(row => row.when)).toEqual([
    'within 14 days of paying the deposit, course not begun',
    '56 days or more before the start (until 27 July 2026)',
    '28 to 55 days before the start (28 July 2026 to 24 August 2026)',
    '7 to 27 days before the start (25 August 2026 to 14 September 2026)',
    'under 7 days before the start, or after it (from 15 September 2026)',
    'the school cancels, or moves the course by more than 7 days',
    'stopped for repeated unsafe work after a written warning',
  ])
})
