import type { PointView } from '#shared/contract/views'

/**
 * A hold or witness point and how it stands: "Hold 4 shut", "Hold 1 released 11 Feb", "Witness 1 told 26 Feb".
 * The day is the school's own.
 */
export function pointWords(point: Pick<PointView, 'name' | 'state' | 'at'>, zone: string): string {
  const when = point.at === null || point.state === 'shut' ? '' : ` ${new Intl.DateTimeFormat('en-GB', { timeZone: zone, day: 'numeric', month: 'short' }).format(new Date(point.at))}`
  return `${point.name} ${point.state}${when}`
}
