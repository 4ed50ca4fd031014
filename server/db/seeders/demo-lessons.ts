import type { EntityManager } from '@mikro-orm/core'
import { readingMinutes } from '../../../shared/lesson/reading-minutes'
import { Course } from '../entities/Course'
import { CourseModule } from '../entities/CourseModule'
import { Lesson } from '../entities/Lesson'
import { LessonVersion } from '../entities/LessonVersion'
import type { SchoolContent } from './content'
import { readLesson } from './read-lesson'

/** The course, its modules, and every lesson of content/lessons published as version 1. @param clips ids of the demo films by their names */
export function makeLessons(em: EntityManager, content: SchoolContent, clips: ReadonlyMap<string, string>, began: Date): Course {
  const { modules, ...about } = content.course
  const course = em.create(Course, { ...about, createdAt: began })
  const made = new Map(modules.map(one => [one.number, em.create(CourseModule, { ...one, course })]))
  for (const { file, markdown, module: number, ...one } of content.lessons) {
    const module = made.get(number)
    if (!module) throw new Error(`content/lessons/${file} is of module ${number}, which content/school/course.json does not have`)
    const document = readLesson({ file, markdown, clips })
    const lesson = em.create(Lesson, { ...one, module, createdAt: began })
    em.create(LessonVersion, { lesson, version: 1, title: one.title, document, minutes: readingMinutes(document), whatChanged: 'First published.', why: 'The course begins with it.', publishedBy: null, publishedAt: began })
  }
  return course
}
