import type { EntityManager } from '@mikro-orm/postgresql'
import { BenchPlace } from '#server/db/entities/BenchPlace'
import { CourseModule } from '#server/db/entities/CourseModule'
import type { Lesson } from '#server/db/entities/Lesson'
import { LessonProgress } from '#server/db/entities/LessonProgress'
import { LessonVersion } from '#server/db/entities/LessonVersion'
import { User } from '#server/db/entities/User'
import { lessonChanged } from '#server/services/mail/templates/lesson-changed'
import { writeMail } from '#server/services/mail/write-mail'
import type { Actor } from '#server/utils/actor'
import type { App } from '#server/utils/app'
import { headsUnderWay } from './head-under-way'

export interface Change { lesson: Lesson, published: LessonVersion, previous: string, by: Actor }

/**
 * Everybody of the course who is in the middle of a head keeps the version before this one, unless they keep an older one for the same
 * head already, and is told once.
 */
export async function keepForMidHead(tx: EntityManager, app: App, { lesson, published, previous, by }: Change): Promise<void> {
  const { course } = await tx.findOneOrFail(CourseModule, { id: lesson.module.id })
  const heads = await headsUnderWay(tx)
  const places = await tx.find(BenchPlace, { state: 'here', person: { $in: [...heads.keys()] }, cohort: { course: course.id } }, { populate: ['person'] })
  const people = new Map(places.flatMap(place => place.person ? [[place.person.id, place.person.$] as const] : []))
  if (people.size === 0) return
  const begun = await tx.find(LessonProgress, { lesson: lesson.id, person: { $in: [...people.keys()] } }, { populate: ['kept'] })
  const next = await tx.find(LessonVersion, { lesson: lesson.id }, { fields: ['version', 'publishedAt'] })
  for (const person of [...people.values()].sort((a, b) => a.id < b.id ? -1 : 1)) {
    const progress = begun.find(one => one.person.id === person.id)
    const followed = next.find(one => one.version === (progress?.kept?.$.version ?? -1) + 1)
    const head = heads.get(person.id)
    // Kept for a head before this one: that head is done, and this one began with the newest.
    const stands = followed !== undefined && head !== undefined && followed.publishedAt > head.receivedAt
    if (progress && !stands) tx.assign(progress, { kept: previous })
    if (!progress) tx.persist(tx.create(LessonProgress, { person: tx.getReference(User, person.id), lesson, kept: tx.getReference(LessonVersion, previous), anchor: null, finishedAt: null, updatedAt: app.clock.schoolNow() }))
    await writeMail(tx, app, {
      key: `lesson-changed:${published.id}:${person.id}`,
      template: 'lesson-changed',
      to: person,
      letter: lessonChanged({ number: lesson.number, title: published.title, whatChanged: published.whatChanged, why: published.why, by: by.name, url: `${app.config.publicUrl}/lessons/${lesson.slug}` }),
    })
  }
  await tx.flush()
}
