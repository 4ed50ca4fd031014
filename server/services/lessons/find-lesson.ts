import { LockMode, type EntityManager } from '@mikro-orm/postgresql'
import { Lesson } from '#server/db/entities/Lesson'
import type { Actor } from '#server/utils/actor'
import type { App } from '#server/utils/app'
import { Refusal } from '#server/utils/refusal'
import { readableLessons } from './lesson-access'

/** A lesson a person may read. @throws {Refusal} lesson_not_found, or as readableLessons */
export async function findReadableLesson(em: EntityManager, app: App, actor: Actor, slug: string) {
  const lesson = await em.findOne(Lesson, { $and: [{ slug }, await readableLessons(em, app, actor)] }, { populate: ['module'] })
  if (!lesson) throw new Refusal('lesson_not_found')
  return lesson
}

/** A lesson to be written, locked until the transaction ends: drafts, publishing and search are of one hand at a time. @throws {Refusal} lesson_not_found */
export async function lockLesson(tx: EntityManager, slug: string) {
  const lesson = await tx.findOne(Lesson, { slug }, { lockMode: LockMode.PESSIMISTIC_WRITE })
  if (!lesson) throw new Refusal('lesson_not_found')
  return lesson
}
