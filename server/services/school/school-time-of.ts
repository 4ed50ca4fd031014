import type { App } from '#server/utils/app'

/** How far ahead of ours a phone's clock may run. */
const aheadMs = 5 * 60_000

/**
 * A time somebody tells, by the school's clock; null when it is still to come. A phone tells real time, and in the demo the school's date
 * stands elsewhere: the time is taken in whichever of the two it lies nearer behind.
 */
export function schoolTimeOf(app: Pick<App, 'clock'>, told: string): Date | null {
  const school = app.clock.schoolNow().getTime()
  const at = Date.parse(told)
  const ago = [app.clock.now().getTime() - at, school - at].filter(ms => ms >= -aheadMs)
  return ago.length === 0 ? null : new Date(school - Math.max(0, Math.min(...ago)))
}
