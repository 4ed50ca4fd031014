import { LockMode, type EntityManager } from '@mikro-orm/postgresql'
import { Lesson } from '#server/db/entities/Lesson'
import { LessonProgress } from '#server/db/entities/LessonProgress'
import { User } from '#server/db/entities/User'
import type { Actor } from '#server/utils/actor'
import type { App } from '#server/utils/app'
import type { ProgressInput, ProgressView } from '#shared/contract/lessons'
import { findReadableLesson } from './find-lesson'

/** Where a person stopped reading, and whether they marked the lesson as read; the same on every device. @throws {Refusal} lesson_not_found, or as readableLessons */
export async function keepProgress(em: EntityManager, app: App, actor: Actor, slug: string, { anchor, finished }: ProgressInput): Promise<ProgressView> {
  return em.transactional(async (tx) => {
    const lesson = await findReadableLesson(tx, app, actor, slug)
    // In the order publishing locks them, lesson before progress, so that neither waits for the other.
    await tx.lock(lesson, LockMode.PESSIMISTIC_READ)
    const now = app.clock.schoolNow()
    const before = await tx.findOne(LessonProgress, { person: actor.id, lesson: lesson.id })
    const finishedAt = finished ? before?.finishedAt ?? now : null
    await tx.createQueryBuilder(LessonProgress).insert({ id: crypto.randomUUID(), person: tx.getReference(User, actor.id), lesson: tx.getReference(Lesson, lesson.id), anchor, finishedAt, updatedAt: now })
      .onConflict(['person', 'lesson']).merge(['anchor', 'finishedAt', 'updatedAt']).execute('run')
    return { anchor, finished }
  })
}
