import { addDays } from '#shared/contract/add-days'

const zone = 'Europe/London'
const parts = new Intl.DateTimeFormat('en-GB', { timeZone: zone, year: 'numeric', month: '2-digit', day: '2-digit' })

/** The calendar day an instant falls on in the school's zone, as YYYY-MM-DD. */
export function schoolDay(at: Date): string {
  const of = Object.fromEntries(parts.formatToParts(at).map(({ type, value }) => [type, value]))
  return `${of.year}-${of.month}-${of.day}`
}

/** Day the balance of a cohort that starts on a day falls due: 28 days before (handbook 5.4). */
export function balanceDueOn(startsOn: string): string {
  return addDays(startsOn, -28)
}
