import { daysBetween } from './calendar-days'

/**
 * Weeks a course is counted in: its days, first and last included, in sevens, a part of a week counted whole.
 *
 * @throws {RangeError} when it ends before it begins
 * @example
 * courseWeeks('2025-09-22', '2025-12-19') // => 13
 */
export function courseWeeks(startsOn: string, endsOn: string): number {
  const days = daysBetween(startsOn, endsOn) + 1
  if (days < 1) throw new RangeError('courseWeeks requires an end that is not before the start')
  return Math.ceil(days / 7)
}

/** Weeks of the course that have begun by the end of a day: the week a person is in counts as used. */
export function weeksBegun(startsOn: string, on: string, weeks: number): number {
  const days = daysBetween(startsOn, on)
  return days < 0 ? 0 : Math.min(weeks, Math.floor(days / 7) + 1)
}
