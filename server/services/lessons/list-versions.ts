import type { EntityManager } from '@mikro-orm/postgresql'
import { LessonVersion } from '#server/db/entities/LessonVersion'
import type { Actor } from '#server/utils/actor'
import type { App } from '#server/utils/app'
import type { LessonVersionSummary } from '#shared/contract/lessons'
import { findReadableLesson } from './find-lesson'

/** Every version of a lesson, newest first: what changed and why. @throws {Refusal} lesson_not_found, or as readableLessons */
export async function listVersions(em: EntityManager, app: App, actor: Actor, slug: string): Promise<LessonVersionSummary[]> {
  const lesson = await findReadableLesson(em, app, actor, slug)
  const versions = await em.find(LessonVersion, { lesson: lesson.id }, { fields: ['version', 'title', 'publishedAt', 'publishedBy.name', 'whatChanged', 'why'], populate: ['publishedBy'], orderBy: { version: 'desc' } })
  return versions.map(({ version, title, publishedAt, publishedBy, whatChanged, why }) => ({ version, title, publishedAt: publishedAt.toISOString(), publishedBy: publishedBy?.$.name ?? null, whatChanged, why }))
}
