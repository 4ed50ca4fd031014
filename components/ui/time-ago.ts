/**
 * How long ago, in the words people use: "just now", "12 min ago", "3 h ago", "yesterday", "5 days ago", then the date.
 * Yesterday is the day before in the given zone, not 24 hours. A time ahead of `now` is given as its date and hour.
 */
export function timeAgo(at: Date, now: Date, zone: string): string {
  const minutes = Math.floor((now.getTime() - at.getTime()) / 60_000)
  if (minutes < -1) return inZone(at, zone, { day: 'numeric', month: 'long', hour: '2-digit', minute: '2-digit' })
  if (minutes < 1) return 'just now'
  if (minutes < 60) return `${minutes} min ago`
  const days = dayNumber(now, zone) - dayNumber(at, zone)
  if (days === 0 || minutes < 6 * 60) return `${Math.floor(minutes / 60)} h ago`
  if (days === 1) return 'yesterday'
  if (days < 7) return `${days} days ago`
  const sameYear = inZone(at, zone, { year: 'numeric' }) === inZone(now, zone, { year: 'numeric' })
  return inZone(at, zone, { day: 'numeric', month: 'long', ...(sameYear ? {} : { year: 'numeric' }) })
}

/** A date and hour as the school writes it: "26 March 2026, 19:40". */
export function schoolTime(at: Date, zone: string): string {
  return inZone(at, zone, { day: 'numeric', month: 'long', year: 'numeric', hour: '2-digit', minute: '2-digit' }).replace(' at ', ', ')
}

function inZone(at: Date, zone: string, parts: Intl.DateTimeFormatOptions): string {
  return new Intl.DateTimeFormat('en-GB', { timeZone: zone, ...parts }).format(at)
}

/** Days since the epoch on the calendar of the zone. */
function dayNumber(at: Date, zone: string): number {
  return Math.floor(Date.parse(`${new Intl.DateTimeFormat('en-CA', { timeZone: zone, year: 'numeric', month: '2-digit', day: '2-digit' }).format(at)}T00:00:00Z`) / 86_400_000)
}
