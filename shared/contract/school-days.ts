/** A calendar day has no zone: it is read and written as the same day everywhere. */
const utc = (day: string) => new Date(`${day.slice(0, 10)}T00:00:00Z`)
const write = (day: string, parts: Intl.DateTimeFormatOptions) => new Intl.DateTimeFormat('en-GB', { timeZone: 'UTC', ...parts }).format(utc(day))

/** "21 September 2026", from `2026-09-21`. */
export const dayInFull = (day: string) => write(day, { day: 'numeric', month: 'long', year: 'numeric' })
/** "Monday 21 September 2026". */
export const weekdayInFull = (day: string) => write(day, { weekday: 'long', day: 'numeric', month: 'long', year: 'numeric' }).replace(',', '')
/** "21 Sep 2026". */
export const dayShort = (day: string) => write(day, { day: 'numeric', month: 'short', year: 'numeric' })

/** "21 September to 18 December 2026": the year twice only where there are two. */
export function daySpan(from: string, until: string): string {
  const sameYear = from.slice(0, 4) === until.slice(0, 4)
  return `${sameYear ? write(from, { day: 'numeric', month: 'long' }) : dayInFull(from)} to ${dayInFull(until)}`
}
