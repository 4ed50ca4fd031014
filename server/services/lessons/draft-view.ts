import type { EntityManager } from '@mikro-orm/postgresql'
import type { Lesson } from '#server/db/entities/Lesson'
import { LessonDraft } from '#server/db/entities/LessonDraft'
import { LessonVersion } from '#server/db/entities/LessonVersion'
import type { LessonDocument } from '#shared/contract/lesson-document'
import type { DraftView } from '#shared/contract/lessons'

const empty: LessonDocument = { type: 'doc', content: [{ type: 'paragraph' }] }

/** A lesson's draft, else what is published, else an empty page: where the next hand begins. */
export async function draftView(em: EntityManager, lesson: Pick<Lesson, 'id' | 'slug' | 'number' | 'title' | 'revision'>): Promise<DraftView> {
  const [newest] = await em.find(LessonVersion, { lesson: lesson.id }, { orderBy: { version: 'desc' }, limit: 1 })
  const draft = await em.findOne(LessonDraft, { lesson: lesson.id }, { populate: ['savedBy'] })
  return {
    slug: lesson.slug,
    number: lesson.number,
    revision: lesson.revision,
    title: draft?.title ?? newest?.title ?? lesson.title,
    document: draft?.document ?? newest?.document ?? empty,
    savedBy: draft?.savedBy.$.name ?? null,
    savedAt: draft?.savedAt.toISOString() ?? null,
    publishedVersion: newest?.version ?? 0,
  }
}
