import type { App } from '#server/utils/app'
import { Refusal } from '#server/utils/refusal'

/** How far ahead of ours a phone's clock may run. */
const aheadMs = 5 * 60_000

/**
 * When a reading was taken, by the school's clock. A phone tells real time, and in the demo the school's date stands elsewhere; a
 * time is taken in whichever of the two it lies nearer behind.
 *
 * @throws {Refusal} taken_in_future
 */
export function whenRead(app: Pick<App, 'clock'>, told: string | undefined): Date {
  const school = app.clock.schoolNow().getTime()
  if (!told) return new Date(school)
  const at = Date.parse(told)
  const ago = [app.clock.now().getTime() - at, school - at].filter(ms => ms >= -aheadMs)
  if (ago.length === 0) throw new Refusal('taken_in_future')
  return new Date(school - Math.max(0, Math.min(...ago)))
}
