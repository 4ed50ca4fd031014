/** A date as written, or what makes it doubtful. */
export type DateReading =
  | { kind: 'date', iso: string, found: string }
  | { kind: 'ambiguous', found: string, either: [string, string] }

const months = ['jan', 'feb', 'mar', 'apr', 'may', 'jun', 'jul', 'aug', 'sep', 'oct', 'nov', 'dec']

/**
 * The first date in a text; null when there is none.
 *
 * Year first, and a month by name, say their order themselves. With dots the day comes first. With strokes or dashes and a year
 * last, the order is only known where one of the two is over twelve or both are the same; else both readings are given back.
 * Two-digit years are of this century.
 */
export function readDate(text: string): DateReading | null {
  const yearFirst = /(?<!\d)(\d{4})([-./])(\d{1,2})\2(\d{1,2})(?!\d)/.exec(text)
  if (yearFirst) return certain(yearFirst[0], Number(yearFirst[1]), Number(yearFirst[3]), Number(yearFirst[4]))

  const named = /(?<!\d)(\d{1,2})(?:st|nd|rd|th)?[\s.-]*(?:of\s+)?([a-z]{3})[a-z]*[\s.,-]*(\d{4}|\d{2})(?!\d)/i.exec(text)
  const monthOfNamed = named ? months.indexOf((named[2] ?? '').toLowerCase()) : -1
  if (named && monthOfNamed >= 0) return certain(named[0], fullYear(named[3]), monthOfNamed + 1, Number(named[1]))
  const monthFirst = /\b([a-z]{3})[a-z]*\.?\s+(\d{1,2})(?:st|nd|rd|th)?,?\s+(\d{4})(?!\d)/i.exec(text)
  const monthOfFirst = monthFirst ? months.indexOf((monthFirst[1] ?? '').toLowerCase()) : -1
  if (monthFirst && monthOfFirst >= 0) return certain(monthFirst[0], Number(monthFirst[3]), monthOfFirst + 1, Number(monthFirst[2]))

  const yearLast = /(?<![\d.,])(\d{1,2})([-./])(\d{1,2})\2(\d{4}|\d{2})(?![\d.,]*\d)/.exec(text)
  if (!yearLast) return null
  const [found, first, sign, second] = [yearLast[0], Number(yearLast[1]), yearLast[2], Number(yearLast[3])]
  const year = fullYear(yearLast[4])
  const dayFirst = isoDate(year, second, first)
  const monthThenDay = isoDate(year, first, second)
  if (sign === '.' && dayFirst) return { kind: 'date', iso: dayFirst, found }
  if (dayFirst && monthThenDay && dayFirst !== monthThenDay) return { kind: 'ambiguous', found, either: [dayFirst, monthThenDay] }
  const only = dayFirst ?? monthThenDay
  return only ? { kind: 'date', iso: only, found } : null
}

function fullYear(text: string | undefined): number {
  const year = Number(text)
  return year < 100 ? 2000 + year : year
}

function certain(found: string, year: number, month: number, day: number): DateReading | null {
  const iso = isoDate(year, month, day)
  return iso ? { kind: 'date', iso, found } : null
}

function isoDate(year: number, month: number, day: number): string | null {
  const leap = year % 4 === 0 && (year % 100 !== 0 || year % 400 === 0)
  const length = [31, leap ? 29 : 28, 31, 30, 31, 30, 31, 31, 30, 31, 30, 31][month - 1]
  if (length === undefined || day < 1 || day > length || year < 1950 || year > 2100) return null
  return `${year}-${String(month).padStart(2, '0')}-${String(day).padStart(2, '0')}`
}
