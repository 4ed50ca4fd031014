import type { EntityManager } from '@mikro-orm/postgresql'
import type { BenchPlace } from '#server/db/entities/BenchPlace'
import type { App } from '#server/utils/app'
import { recordEvent } from '#server/utils/record-event'

/** A further year of the lessons for a finished student: from the day they end, or from today when they have ended. The place is held by the caller. */
export function renewAccess(tx: EntityManager, app: Pick<App, 'clock'>, place: BenchPlace): 'booked' | 'no-place' {
  if (place.state !== 'finished') return 'no-place'
  const now = app.clock.schoolNow()
  const from = place.accessUntil && place.accessUntil > now ? place.accessUntil : now
  const until = new Date(from)
  // 29 February goes on to 1 March.
  until.setUTCFullYear(until.getUTCFullYear() + 1)
  place.accessUntil = until
  recordEvent(tx, { actor: 'job', action: 'access-renewed', subject: `place:${place.id}`, detail: { until: until.toISOString() } })
  return 'booked'
}
