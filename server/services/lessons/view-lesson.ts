import type { EntityManager } from '@mikro-orm/postgresql'
import { LessonDraft } from '#server/db/entities/LessonDraft'
import { LessonNote } from '#server/db/entities/LessonNote'
import { LessonProgress } from '#server/db/entities/LessonProgress'
import { LessonVersion } from '#server/db/entities/LessonVersion'
import { hasRole, type Actor } from '#server/utils/actor'
import type { App } from '#server/utils/app'
import { Refusal } from '#server/utils/refusal'
import type { LessonView } from '#shared/contract/lessons'
import { drawLesson } from './draw-lesson'
import { findReadableLesson } from './find-lesson'
import { noteView } from './note-view'
import { versionsFor } from './versions-for'

/**
 * A lesson as a person reads it: the version they keep to, else the newest; or the version asked for.
 *
 * @throws {Refusal} lesson_not_found, also for a version there is not; or as readableLessons
 */
export async function viewLesson(em: EntityManager, app: App, actor: Actor, slug: string, asked?: number): Promise<LessonView> {
  const lesson = await findReadableLesson(em, app, actor, slug)
  const read = (await versionsFor(em, actor.id, lesson.id)).get(lesson.id)
  const version = asked ?? read?.version
  if (!read || version === undefined) throw new Refusal('lesson_not_found')
  const said = await em.findOne(LessonVersion, { lesson: lesson.id, version })
  if (!said) throw new Refusal('lesson_not_found')
  const progress = await em.findOne(LessonProgress, { person: actor.id, lesson: lesson.id })
  const notes = await em.find(LessonNote, { person: actor.id, lesson: lesson.id }, { orderBy: { createdAt: 'asc' } })
  const keeps = version === read.version && version < read.newest
  const since = keeps ? await em.find(LessonVersion, { lesson: lesson.id, version: { $gt: version } }, { fields: ['whatChanged', 'why'], orderBy: { version: 'asc' } }) : []
  return {
    number: lesson.number,
    slug,
    title: said.title,
    module: lesson.module.$.title,
    moduleNumber: lesson.module.$.number,
    ops: lesson.ops,
    version,
    minutes: said.minutes,
    progress: progress ? { anchor: progress.anchor ?? null, finished: progress.finishedAt !== null } : null,
    hasDraft: hasRole(actor, 'instructor') && await em.count(LessonDraft, { lesson: lesson.id }) > 0,
    ...await drawLesson(em, actor, said.document),
    publishedAt: said.publishedAt.toISOString(),
    whatChanged: said.whatChanged,
    why: said.why,
    kept: keeps ? { newest: read.newest, whatChanged: since.map(one => one.whatChanged).join('\n'), why: since.map(one => one.why).join('\n') } : null,
    notes: notes.map(note => noteView(note, lesson)),
  }
}
