import { dayInWords, weekdayOf } from '#shared/domain/money/calendar-days'
import { longDate, timeOfDay } from '#shared/contract/school-time'

/** "Monday 21 September 2026", of a day as YYYY-MM-DD. */
export const dateInWords = (day: string): string => `${weekdayOf(day)} ${dayInWords(day)}`

/** "19:40 on Thursday 26 March", in the school's zone. */
export const timeInWords = (iso: string): string => `${timeOfDay(iso)} on ${longDate(iso)}`
