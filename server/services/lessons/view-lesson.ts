import type { EntityManager } from '@mikro-orm/postgresql'
import { LessonVersion } from '#server/db/entities/LessonVersion'
import { Refusal } from '#server/utils/refusal'
import type { LessonView } from '#shared/contract/lessons'
import { lessonHtml } from './lesson-html'

/**
 * A lesson as its newest version says it.
 *
 * @throws {Refusal} lesson_not_found
 */
export async function viewLesson(em: EntityManager, slug: string): Promise<LessonView> {
  const [newest] = await em.find(LessonVersion, { lesson: { slug } }, { populate: ['lesson'], orderBy: { version: 'desc' }, limit: 1 })
  if (!newest) throw new Refusal('lesson_not_found')
  const { number, title, module, ops } = newest.lesson.$
  return { number, slug, title, module, ops, html: lessonHtml(newest.markdown), version: newest.version, publishedAt: newest.publishedAt.toISOString() }
}
