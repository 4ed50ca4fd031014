const short = new Intl.DateTimeFormat('en-GB', { timeZone: 'Europe/London', day: 'numeric', month: 'short', year: 'numeric' })

/** "1 Jun 2025": a day, or the school's day of an instant. A day read as midnight UTC is the same day in London, never the one before. */
export const shortDay = (iso: string): string => short.format(new Date(iso)).replace('Sept', 'Sep')
