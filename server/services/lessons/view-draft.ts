import type { EntityManager } from '@mikro-orm/postgresql'
import { Lesson } from '#server/db/entities/Lesson'
import { Refusal } from '#server/utils/refusal'
import type { DraftView } from '#shared/contract/lessons'
import { draftView } from './draft-view'

/** What an instructor goes on writing; makes nothing. @throws {Refusal} lesson_not_found */
export async function viewDraft(em: EntityManager, slug: string): Promise<DraftView> {
  const lesson = await em.findOne(Lesson, { slug })
  if (!lesson) throw new Refusal('lesson_not_found')
  return draftView(em, lesson)
}
