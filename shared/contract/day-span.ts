import { dayInWords } from '../domain/money/calendar-days'

/** "21 September to 18 December 2026": the year twice only where there are two. Days are YYYY-MM-DD. */
export function daySpan(from: string, until: string): string {
  const first = dayInWords(from)
  return `${from.slice(0, 4) === until.slice(0, 4) ? first.replace(/ \d{4}$/, '') : first} to ${dayInWords(until)}`
}
