import type { EntityManager } from '@mikro-orm/postgresql'
import { BenchPlace } from '#server/db/entities/BenchPlace'
import { CourseModule } from '#server/db/entities/CourseModule'
import { Lesson } from '#server/db/entities/Lesson'
import { LessonProgress } from '#server/db/entities/LessonProgress'
import { WatchPosition } from '#server/db/entities/WatchPosition'
import { placeLink } from '#server/services/places/place-link'
import type { Actor } from '#server/utils/actor'
import type { App } from '#server/utils/app'
import type { LessonSummary, ShelfView } from '#shared/contract/lessons'
import { lessonAccess } from './lesson-access'
import { lessonSummaries } from './list-lessons'

/** What a student may come back to: modules of the courses taken while access runs, and where they stopped, on whichever device. */
export async function viewShelf(em: EntityManager, app: App, actor: Actor): Promise<ShelfView> {
  const { everything, courses, until } = await lessonAccess(em, app, actor)
  const open = everything || courses.length > 0
  const [place] = await em.find(BenchPlace, { person: actor.id, state: 'finished' }, { orderBy: { accessUntil: 'desc nulls last', createdAt: 'desc' }, limit: 1 })
  const access = { until: until?.toISOString() ?? null, open, renewal: place ? { url: placeLink(app, place) } : null }
  if (!open) return { access, modules: [], resume: null }
  const lessons = await lessonSummaries(em, actor, everything ? {} : { module: { course: { $in: courses } } })
  const modules = await em.find(CourseModule, everything ? {} : { course: { $in: courses } }, { orderBy: { course: 'asc', number: 'asc' } })
  return {
    access,
    modules: modules.map(({ number, title, outcome }) => {
      const own = lessons.filter(one => one.module === title && one.moduleNumber === number)
      return { number, title, outcome, lessons: own, finished: own.filter(one => one.progress?.finished).length }
    }),
    resume: await whereStopped(em, actor, lessons),
  }
}

/** The lesson read last and not marked as read, and the film of it left in the middle; or the film watched last, where that is later. */
async function whereStopped(em: EntityManager, actor: Actor, lessons: readonly LessonSummary[]): Promise<ShelfView['resume']> {
  const slugs = lessons.map(one => one.slug)
  const [read] = await em.find(LessonProgress, { person: actor.id, finishedAt: null, lesson: { slug: { $in: slugs } } }, { populate: ['lesson'], orderBy: { updatedAt: 'desc' }, limit: 1 })
  const [watched] = await em.find(WatchPosition, { person: actor.id, finishedAt: null, seconds: { $gt: 0 } }, { populate: ['asset'], orderBy: { updatedAt: 'desc' }, limit: 1 })
  const showing = watched ? await lessonShowing(em, watched.asset.id, slugs) : null
  const clip = watched && showing ? { id: watched.asset.id, title: watched.asset.$.title, seconds: watched.seconds } : null
  if (watched && showing && (!read || watched.updatedAt > read.updatedAt)) {
    const anchor = read?.lesson.id === showing.id ? read.anchor ?? null : null
    return { slug: showing.slug, number: showing.number, title: showing.title, anchor, clip }
  }
  if (!read) return null
  const { slug, number, title } = read.lesson.$
  return { slug, number, title, anchor: read.anchor ?? null, clip: showing?.slug === slug ? clip : null }
}

/** The first lesson whose newest version shows a film. */
async function lessonShowing(em: EntityManager, asset: string, slugs: readonly string[]): Promise<Lesson | null> {
  const rows = await em.getConnection().execute<{ id: string }[]>(`
    select lesson.id from lesson_version version join lesson on lesson.id = version.lesson_id
     where version.document @\\? ?::jsonpath and not exists (select 1 from lesson_version newer where newer.lesson_id = version.lesson_id and newer.version > version.version)
       and lesson.slug in (select jsonb_array_elements_text(?::jsonb))
     order by lesson.number limit 1`, [`$.**.asset ? (@ == "${asset}")`, JSON.stringify(slugs)], 'all', em.getTransactionContext())
  return rows[0] ? em.findOne(Lesson, { id: rows[0].id }) : null
}
