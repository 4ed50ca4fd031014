import type { App } from '#server/utils/app'

/**
 * When evidence was taken, by the school's clock. A phone says so in real time, so its distance from now is what counts; a phone whose
 * clock runs ahead says now.
 */
export function takenWhen(app: Pick<App, 'clock'>, told: string | undefined): Date {
  const now = app.clock.schoolNow()
  if (!told) return now
  const ago = app.clock.now().getTime() - Date.parse(told)
  return new Date(now.getTime() - Math.max(0, ago))
}
