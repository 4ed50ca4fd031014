const zone = 'Europe/London'
const parts = new Intl.DateTimeFormat('en-GB', { timeZone: zone, hourCycle: 'h23', year: 'numeric', month: '2-digit', day: '2-digit', hour: '2-digit', minute: '2-digit', second: '2-digit' })

/** What the clock on the school's wall shows at an instant, as milliseconds, as if it were UTC. */
function wallClock(at: number): number {
  const get = Object.fromEntries(parts.formatToParts(at).map(part => [part.type, Number(part.value)]))
  return Date.UTC(get.year ?? 0, (get.month ?? 1) - 1, get.day, get.hour, get.minute, get.second)
}

/**
 * An instant as people write it: ISO with an offset or Z, or without one by the clock on the school's wall.
 *
 * @throws {RangeError} when it is no date and time
 * @example
 * schoolInstant('2026-04-14T19:00') // => 2026-04-14T18:00:00.000Z, in summer time
 */
export function schoolInstant(text: string): Date {
  const read = /^(\d{4}-\d\d-\d\d)(?:[T ](\d\d:\d\d(?::\d\d)?))?(Z|[+-]\d\d:\d\d)?$/.exec(text.trim())
  const [, date, time = '00:00', offset] = read ?? []
  const at = Date.parse(`${date}T${time}${offset ?? 'Z'}`)
  // A day that is not in the calendar ("2026-02-30") reads as no date or as another one.
  if (!read || !Number.isFinite(at) || !new Date(Date.parse(`${date}T00:00Z`)).toISOString().startsWith(date ?? '-')) throw new RangeError(`"${text}" is not an instant such as 2026-03-26T19:40`)
  if (offset !== undefined) return new Date(at)
  const first = at - (wallClock(at) - at)
  // Once more, for the hours beside a change of the clocks.
  return new Date(at - (wallClock(first) - first))
}
