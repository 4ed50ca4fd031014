import type { EntityManager, FilterQuery } from '@mikro-orm/postgresql'
import { BenchPlace } from '#server/db/entities/BenchPlace'
import type { Lesson } from '#server/db/entities/Lesson'
import { hasRole, type Actor } from '#server/utils/actor'
import type { App } from '#server/utils/app'
import { Refusal } from '#server/utils/refusal'

/**
 * What somebody may read: `everything` for staff; for students the courses they are in, or finished while their access runs.
 * `until` is when a finished student's access ends, or ended; null for whoever never finished.
 */
export interface LessonAccess { everything: boolean, courses: string[], until: Date | null }

const standing = ['deposit-paid', 'confirmed', 'here']

/** Who reads which lessons, by roles and places as they stand now, by the school's clock. */
export async function lessonAccess(em: EntityManager, app: Pick<App, 'clock'>, actor: Actor): Promise<LessonAccess> {
  if (hasRole(actor, 'instructor', 'admin', 'safety')) return { everything: true, courses: [], until: null }
  const places = await em.find(BenchPlace, { person: actor.id, state: { $in: ['deposit-paid', 'confirmed', 'here', 'finished'] } }, { populate: ['cohort'] })
  const now = app.clock.schoolNow()
  const open = places.filter(place => standing.includes(place.state) || (place.accessUntil ?? now) > now)
  const ends = places.flatMap(place => place.state === 'finished' ? [(place.accessUntil ?? place.finishedAt ?? place.createdAt).getTime()] : [])
  return {
    everything: false,
    courses: [...new Set(open.flatMap(place => place.cohort.$.course?.id ?? []))],
    until: ends.length > 0 ? new Date(Math.max(...ends)) : null,
  }
}

/**
 * The condition that finds only published lessons a person may read.
 *
 * @throws {Refusal} access_ended once a finished student's access has run out, lessons_not_open to whoever has no place yet
 */
export async function readableLessons(em: EntityManager, app: Pick<App, 'clock'>, actor: Actor): Promise<FilterQuery<Lesson>> {
  const { everything, courses, until } = await lessonAccess(em, app, actor)
  if (everything) return {}
  if (courses.length === 0) throw new Refusal(until ? 'access_ended' : 'lessons_not_open')
  return { module: { course: { $in: courses } } }
}
