import type { EntityManager } from '@mikro-orm/postgresql'
import { Lesson } from '#server/db/entities/Lesson'
import { rebuildPassages } from '#server/services/lessons/rebuild-passages'

/** Lets search find the lessons a school starts with, and what is said in their films. */
export async function seedPassages(em: EntityManager): Promise<void> {
  const lessons = await em.find(Lesson, {}, { orderBy: { number: 'asc' } })
  for (const { id } of lessons) await em.fork().transactional(tx => rebuildPassages(tx, id))
}
