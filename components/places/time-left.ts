/**
 * How long is left, in words: "2 days 3 hours", "1 hour 5 minutes", "28 minutes", "less than a minute"; null when nothing is.
 * Rounded down, so that nobody is promised a minute that is not there.
 */
export function timeLeft(milliseconds: number): string | null {
  if (!(milliseconds > 0)) return null
  const minutes = Math.floor(milliseconds / 60_000)
  const parts = [[Math.floor(minutes / 1440), 'day'], [Math.floor(minutes / 60) % 24, 'hour'], [minutes % 60, 'minute']] as const
  const first = parts.findIndex(([count]) => count > 0)
  if (first < 0) return 'less than a minute'
  return parts.slice(first, first + 2).filter(([count]) => count > 0).map(([count, word]) => `${count} ${word}${count === 1 ? '' : 's'}`).join(' ')
}
