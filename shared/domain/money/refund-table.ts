import { dayAfter, dayInWords } from './calendar-days'
import { refundRules, type RefundRule } from './refund-rules'

/** Last and first day of a row that counts days before the start. */
const daysOf: Partial<Record<RefundRule['code'], { atLeast: number | null, atMost: number | null }>> = {
  '56-days': { atLeast: 56, atMost: null },
  '28-days': { atLeast: 28, atMost: 55 },
  '7-days': { atLeast: 7, atMost: 27 },
  'under-7-days': { atLeast: null, atMost: 6 },
}

/**
 * The refund table of one cohort in plain words, with the days the rows mean for its start.
 *
 * @throws {RangeError} when the start is no day of the calendar
 */
export function refundTable({ startsOn }: { startsOn: string }): { when: string, deposit: string, balance: string }[] {
  return refundRules.map(({ code, when, deposit, balance }) => ({ when: `${when}${datesOf(code, startsOn)}`, deposit, balance }))
}

function datesOf(code: RefundRule['code'], startsOn: string): string {
  const days = daysOf[code]
  if (!days) return ''
  const last = days.atLeast === null ? null : dayInWords(dayAfter(startsOn, -days.atLeast))
  const first = days.atMost === null ? null : dayInWords(dayAfter(startsOn, -days.atMost))
  if (first === null) return ` (until ${last})`
  return last === null ? ` (from ${first})` : ` (${first} to ${last})`
}
