import type { EntityManager } from '@mikro-orm/postgresql'
import { LessonDraft } from '#server/db/entities/LessonDraft'
import { LessonVersion } from '#server/db/entities/LessonVersion'
import { User } from '#server/db/entities/User'
import type { Actor } from '#server/utils/actor'
import type { App } from '#server/utils/app'
import { recordEvent } from '#server/utils/record-event'
import { Refusal } from '#server/utils/refusal'
import type { LessonPublished, PublishInput } from '#shared/contract/lessons'
import { readingMinutes } from '#shared/lesson/reading-minutes'
import { withHeadingIds } from '#shared/lesson/with-heading-ids'
import { draftView } from './draft-view'
import { lockLesson } from './find-lesson'
import { goodDocument } from './good-document'
import { keepForMidHead } from './keep-for-mid-head'
import { publishProblems } from './publish-problems'
import { rebuildPassages } from './rebuild-passages'

/**
 * Makes the draft the lesson's next version, for good. Search finds it from now on; students in the middle of a head keep the version
 * they began with, and are told what changed and why (message 18).
 *
 * @throws {Refusal} lesson_not_found, draft_missing, draft_stale with `theirs`, or the code of the first thing that keeps it from being
 *   published (alt_missing, clip_not_ready, ...), with `issues` naming all of them
 */
export async function publishLesson(em: EntityManager, app: App, actor: Actor, slug: string, { seen, whatChanged, why }: PublishInput): Promise<LessonPublished> {
  return em.transactional(async (tx) => {
    const lesson = await lockLesson(tx, slug)
    if (seen !== lesson.revision) throw new Refusal('draft_stale', undefined, { theirs: await draftView(tx, lesson) })
    const draft = await tx.findOne(LessonDraft, { lesson: lesson.id })
    if (!draft) throw new Refusal('draft_missing')
    // Checked again: the grammar may have grown stricter since it was saved.
    const document = withHeadingIds(goodDocument(draft.document))
    const problems = await publishProblems(tx, document)
    const [first] = problems
    if (first) throw new Refusal(first.code, first.message, { issues: problems })

    const [newest] = await tx.find(LessonVersion, { lesson: lesson.id }, { fields: ['version'], orderBy: { version: 'desc' }, limit: 1 })
    const version = (newest?.version ?? 0) + 1
    const published = tx.create(LessonVersion, {
      lesson, version, title: draft.title, document, minutes: readingMinutes(document), whatChanged, why, publishedBy: tx.getReference(User, actor.id), publishedAt: app.clock.schoolNow(),
    })
    lesson.title = draft.title
    // Whoever still writes over the draft that was is told.
    lesson.revision += 1
    tx.persist(published)
    tx.remove(draft)
    recordEvent(tx, { actor: actor.id, action: 'lesson-published', subject: `lesson:${lesson.id}`, detail: { version, revision: lesson.revision } })
    await tx.flush()
    await rebuildPassages(tx, lesson.id)
    if (newest) await keepForMidHead(tx, app, { lesson, published, previous: newest.id, by: actor })
    return { slug, version }
  })
}
