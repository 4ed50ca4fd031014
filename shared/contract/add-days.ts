/** The day that many days after another; both YYYY-MM-DD, no zone has a part in it. */
export function addDays(day: string, days: number): string {
  return new Date(Date.parse(`${day}T00:00:00Z`) + days * 24 * 3_600_000).toISOString().slice(0, 10)
}

/** Whole days from one to another; negative when the second comes first. */
export function daysFrom(from: string, to: string): number {
  return Math.round((Date.parse(`${to}T00:00:00Z`) - Date.parse(`${from}T00:00:00Z`)) / (24 * 3_600_000))
}
