import type { App } from '#server/utils/app'

/**
 * Where an instant of the real world lies by the school's own clock, which stands elsewhere in the demo: the days of the refund rule
 * are counted between school dates.
 */
export function schoolInstant({ clock }: Pick<App, 'clock'>, at: Date): Date {
  return new Date(at.getTime() + clock.schoolNow().getTime() - clock.now().getTime())
}
