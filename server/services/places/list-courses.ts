import type { EntityManager } from '@mikro-orm/postgresql'
import { Cohort } from '#server/db/entities/Cohort'
import { Course } from '#server/db/entities/Course'
import { CourseModule } from '#server/db/entities/CourseModule'
import { Lesson } from '#server/db/entities/Lesson'
import type { App } from '#server/utils/app'
import type { CourseView } from '#shared/contract/places'
import { schoolDay } from '#shared/contract/school-day'
import { countPlaces } from './count-places'
import { toOffer } from './view-offer'

/** What the school teaches, for strangers: modules, lessons by title, and the cohorts that take asks, soonest first. */
export async function listCourses(em: EntityManager, app: Pick<App, 'clock'>): Promise<CourseView[]> {
  const courses = await em.find(Course, {}, { orderBy: { title: 'asc' } })
  const modules = await em.find(CourseModule, {}, { orderBy: { number: 'asc' } })
  const lessons = await em.find(Lesson, {}, { orderBy: { number: 'asc' } })
  const cohorts = await em.find(Cohort, { open: true, startsOn: { $gt: schoolDay(app.clock.schoolNow()) } }, { populate: ['course'], orderBy: { startsOn: 'asc', code: 'asc' } })
  const counts = await countPlaces(em, cohorts.map(one => one.id))
  return courses.map(({ id, code, title, summary }) => ({
    code, title, summary,
    modules: modules.filter(one => one.course.id === id).map(one => ({ number: one.number, title: one.title, outcome: one.outcome, lessons: lessons.filter(lesson => lesson.module.id === one.id).map(lesson => lesson.title) })),
    cohorts: cohorts.filter(one => one.course?.id === id).map(one => toOffer(app, one, counts.get(one.id))),
  }))
}
