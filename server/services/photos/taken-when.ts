import { schoolTimeOf } from '#server/services/school/school-time-of'
import type { App } from '#server/utils/app'

/** When a photo was taken, by the school's clock. A phone whose clock runs ahead says now: the picture is there, so it was taken. */
export function takenWhen(app: Pick<App, 'clock'>, told: string | undefined): Date {
  return (told === undefined ? null : schoolTimeOf(app, told)) ?? app.clock.schoolNow()
}
