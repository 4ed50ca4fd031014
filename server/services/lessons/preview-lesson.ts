import type { EntityManager } from '@mikro-orm/postgresql'
import { Lesson } from '#server/db/entities/Lesson'
import type { Actor } from '#server/utils/actor'
import { Refusal } from '#server/utils/refusal'
import type { PreviewInput, PreviewView } from '#shared/contract/lessons'
import { withHeadingIds } from '#shared/lesson/with-heading-ids'
import { drawLesson } from './draw-lesson'
import { goodDocument } from './good-document'
import { publishProblems } from './publish-problems'

/** A text as students would see it, and what publishing it would refuse; keeps nothing. @throws {Refusal} lesson_not_found, document_invalid */
export async function previewLesson(em: EntityManager, actor: Actor, slug: string, { title, document: given }: PreviewInput): Promise<PreviewView> {
  if (await em.count(Lesson, { slug }) === 0) throw new Refusal('lesson_not_found')
  const document = withHeadingIds(goodDocument(given))
  return { title, ...await drawLesson(em, actor, document), problems: await publishProblems(em, document) }
}
