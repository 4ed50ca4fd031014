import type { EntityManager, FilterQuery } from '@mikro-orm/postgresql'
import { Lesson } from '#server/db/entities/Lesson'
import { LessonDraft } from '#server/db/entities/LessonDraft'
import { LessonProgress } from '#server/db/entities/LessonProgress'
import { LessonVersion } from '#server/db/entities/LessonVersion'
import { hasRole, type Actor } from '#server/utils/actor'
import type { App } from '#server/utils/app'
import type { LessonSummary } from '#shared/contract/lessons'
import { readableLessons } from './lesson-access'
import { versionsFor } from './versions-for'

/** The lessons a person may read, in order, each at the version they read; instructors see those never published too. @throws {Refusal} as readableLessons */
export async function listLessons(em: EntityManager, app: App, actor: Actor): Promise<LessonSummary[]> {
  return lessonSummaries(em, actor, await readableLessons(em, app, actor))
}

/** The same for a condition that says which lessons. */
export async function lessonSummaries(em: EntityManager, actor: Actor, where: FilterQuery<Lesson>): Promise<LessonSummary[]> {
  const lessons = await em.find(Lesson, where, { populate: ['module'], orderBy: { number: 'asc' } })
  const read = await versionsFor(em, actor.id)
  const writes = hasRole(actor, 'instructor')
  // What a version says stays where it is: a list needs its title only.
  const titles = await em.find(LessonVersion, { $or: [...read.values()].map(one => ({ lesson: one.lesson, version: one.version })) }, { fields: ['lesson', 'title', 'minutes'] })
  const progress = await em.find(LessonProgress, { person: actor.id })
  const drafts = writes ? await em.find(LessonDraft, {}, { fields: ['lesson'] }) : []
  return lessons.flatMap(({ id, number, slug, title, module, ops }): LessonSummary[] => {
    const version = read.get(id)?.version ?? 0
    const said = titles.find(one => one.lesson.id === id)
    if (version === 0 && !writes) return []
    const own = progress.find(one => one.lesson.id === id)
    return [{
      number, slug, ops, version,
      title: said?.title ?? title,
      module: module.$.title,
      moduleNumber: module.$.number,
      minutes: said?.minutes ?? null,
      progress: own ? { anchor: own.anchor ?? null, finished: own.finishedAt !== null } : null,
      hasDraft: drafts.some(one => one.lesson.id === id),
    }]
  })
}
