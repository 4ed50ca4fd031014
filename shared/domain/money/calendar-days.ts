const dayMs = 86_400_000
const withYear = new Intl.DateTimeFormat('en-GB', { timeZone: 'UTC', day: 'numeric', month: 'long', year: 'numeric' })
const weekday = new Intl.DateTimeFormat('en-GB', { timeZone: 'UTC', weekday: 'long' })

const startOf = (day: string): number => Date.parse(`${day}T00:00:00Z`)

/** Whether there is such a day, written "2026-09-21". JavaScript reads 31 June as 1 July; a refund should not. */
export function isDay(text: string): boolean {
  const ms = /^\d{4}-\d{2}-\d{2}$/.test(text) ? startOf(text) : Number.NaN
  return Number.isFinite(ms) && new Date(ms).toISOString().slice(0, 10) === text
}

/** The day's number since 1970-01-01. @throws {RangeError} when it is no day of the calendar */
function dayNumber(day: string): number {
  if (!isDay(day)) throw new RangeError(`"${day}" is not a day of the calendar`)
  return startOf(day) / dayMs
}

/**
 * Calendar days from one day to another, negative when it lies before. Days as "2026-09-21"; no clock time and no zone has a part in
 * it, so a change to summer time is never a day more or less.
 *
 * @throws {RangeError} when either is no day of the calendar
 * @example
 * daysBetween('2025-08-13', '2025-09-22') // => 40
 */
export function daysBetween(from: string, to: string): number {
  return dayNumber(to) - dayNumber(from)
}

/** The day so many days later, or earlier when negative. @throws {RangeError} when it is no day, or not a whole number of days */
export function dayAfter(day: string, days: number): string {
  if (!Number.isInteger(days)) throw new RangeError('dayAfter requires a whole number of days')
  return new Date((dayNumber(day) + days) * dayMs).toISOString().slice(0, 10)
}

/** "21 September 2026". */
export function dayInWords(day: string): string {
  return withYear.format(startOf(day))
}

/** "Monday". */
export function weekdayOf(day: string): string {
  return weekday.format(startOf(day))
}
