import type { EntityManager } from '@mikro-orm/postgresql'
import { Lesson } from '#server/db/entities/Lesson'
import type { LessonSummary } from '#shared/contract/lessons'

/** The lessons of the course, in order. */
export async function listLessons(em: EntityManager): Promise<LessonSummary[]> {
  const lessons = await em.find(Lesson, {}, { orderBy: { number: 'asc' } })
  return lessons.map(({ number, slug, title, module, ops }) => ({ number, slug, title, module, ops }))
}
