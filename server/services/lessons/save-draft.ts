import type { EntityManager } from '@mikro-orm/postgresql'
import { LessonDraft } from '#server/db/entities/LessonDraft'
import { User } from '#server/db/entities/User'
import type { Actor } from '#server/utils/actor'
import { Refusal } from '#server/utils/refusal'
import type { DraftSaveInput, DraftView } from '#shared/contract/lessons'
import { draftView } from './draft-view'
import { lockLesson } from './find-lesson'
import { goodDocument } from './good-document'

/**
 * Keeps a lesson as somebody has written it so far, over the revision they saw. Of two who save over the same one is told, with the
 * other's text beside it, and nothing of either is lost.
 *
 * @throws {Refusal} lesson_not_found, document_invalid, draft_stale with `theirs`
 */
export async function saveDraft(em: EntityManager, actor: Actor, slug: string, { seen, title, document: given }: DraftSaveInput): Promise<DraftView> {
  const document = goodDocument(given)
  return em.transactional(async (tx) => {
    const lesson = await lockLesson(tx, slug)
    if (seen !== lesson.revision) throw new Refusal('draft_stale', undefined, { theirs: await draftView(tx, lesson) })
    lesson.revision += 1
    const savedBy = tx.getReference(User, actor.id)
    // Sessions and signatures live in real time; so does who saved last.
    const now = { title, savedBy, savedAt: new Date() }
    const draft = await tx.findOne(LessonDraft, { lesson: lesson.id })
    if (draft) tx.assign(draft, { ...now, document }, { mergeObjectProperties: false })
    else tx.persist(tx.create(LessonDraft, { lesson, ...now, document }))
    await tx.flush()
    return draftView(tx, lesson)
  })
}
