/**
 * Days of the school's calendar, as YYYY-MM-DD: what start dates, due dates and expiries are counted in. An instant falls on the day
 * the wall clock of the shop shows, whatever the zone of the machine.
 */

const zone = 'Europe/London'
const parts = new Intl.DateTimeFormat('en-CA', { timeZone: zone, year: 'numeric', month: '2-digit', day: '2-digit' })
const wall = new Intl.DateTimeFormat('en-GB', { timeZone: zone, hour: '2-digit', hourCycle: 'h23' })
const withYear = new Intl.DateTimeFormat('en-GB', { timeZone: 'UTC', day: 'numeric', month: 'long', year: 'numeric' })
const weekday = new Intl.DateTimeFormat('en-GB', { timeZone: 'UTC', weekday: 'long' })
const dayMs = 24 * 3_600_000
const hourMs = 3_600_000

const utc = (day: string) => Date.parse(`${day}T00:00:00Z`)

/** The day an instant falls on: "2026-03-26". */
export function schoolDay(at: Date): string {
  return parts.format(at)
}

/** Hour of the shop's wall clock, 0 to 23. */
export function schoolHour(at: Date): number {
  return Number(wall.format(at))
}

/** Whether there is such a day: not 2026-02-31. */
export function isDay(text: string): boolean {
  return /^\d{4}-\d{2}-\d{2}$/.test(text) && Number.isFinite(utc(text)) && new Date(utc(text)).toISOString().startsWith(text)
}

/** The day `count` days later, earlier when negative. */
export function addDays(day: string, count: number): string {
  return new Date(utc(day) + count * dayMs).toISOString().slice(0, 10)
}

/** Days from one day to another; negative when it lies before. */
export function daysBetween(from: string, to: string): number {
  return Math.round((utc(to) - utc(from)) / dayMs)
}

/** The instant a day begins at the school. */
export function startOfDay(day: string): Date {
  // Within a few hours of midnight UTC; the zone is never further off than that.
  const near = utc(day)
  for (let hour = -14; hour <= 14; hour++) {
    const at = new Date(near + hour * hourMs)
    if (schoolDay(at) === day) return at
  }
  throw new RangeError(`startOfDay cannot find "${day}"`)
}

/** "21 September 2026". */
export function dayInWords(day: string): string {
  return withYear.format(new Date(utc(day)))
}

/** "Monday". */
export function weekdayOf(day: string): string {
  return weekday.format(new Date(utc(day)))
}

const shortWithYear = new Intl.DateTimeFormat('en-GB', { timeZone: 'UTC', day: 'numeric', month: 'short', year: '2-digit' })

/** "21 Sept 26", for tables. */
export function shortDay(day: string): string {
  return shortWithYear.format(new Date(utc(day)))
}
