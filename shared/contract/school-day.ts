/**
 * Days of the school's calendar, as YYYY-MM-DD: what start dates, due dates and expiries are counted in. An instant falls on the day
 * the wall clock of the shop shows, whatever the zone of the machine.
 */

const zone = 'Europe/London'
const parts = new Intl.DateTimeFormat('en-CA', { timeZone: zone, year: 'numeric', month: '2-digit', day: '2-digit' })
const wall = new Intl.DateTimeFormat('en-GB', { timeZone: zone, hour: '2-digit', hourCycle: 'h23' })
const hourMs = 3_600_000

/** The day an instant falls on: "2026-03-26". */
export function schoolDay(at: Date): string {
  return parts.format(at)
}

/** Hour of the shop's wall clock, 0 to 23. */
export function schoolHour(at: Date): number {
  return Number(wall.format(at))
}

/** The instant a day begins at the school. */
export function startOfDay(day: string): Date {
  // Within a few hours of midnight UTC; the zone is never further off than that.
  const near = Date.parse(`${day}T00:00:00Z`)
  for (let hour = -14; hour <= 14; hour++) {
    const at = new Date(near + hour * hourMs)
    if (schoolDay(at) === day) return at
  }
  throw new RangeError(`startOfDay cannot find "${day}"`)
}
