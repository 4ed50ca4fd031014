import { dayAfter } from './calendar-days'

/** Days before the start when the balance falls due. Source: handbook 5.4. */
const balanceDays = 28

/**
 * The day the balance falls due: 28 days before the start, or the day the deposit was paid where that is later.
 *
 * @throws {RangeError} when either is no day of the calendar
 */
export function balanceDueOn(startsOn: string, depositPaidOn: string | null = null): string {
  const due = dayAfter(startsOn, -balanceDays)
  // Days written year first are in order as text.
  return depositPaidOn !== null && depositPaidOn > due ? depositPaidOn : due
}
