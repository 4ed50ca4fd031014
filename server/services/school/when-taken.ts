import { schoolTimeOf } from './school-time-of'
import type { App } from '#server/utils/app'
import { Refusal } from '#server/utils/refusal'

/** When evidence was taken, by the school's clock. @throws {Refusal} taken_in_future */
export function whenTaken(app: Pick<App, 'clock'>, told: string | undefined): Date {
  if (told === undefined) return app.clock.schoolNow()
  const at = schoolTimeOf(app, told)
  if (at === null) throw new Refusal('taken_in_future')
  return at
}
