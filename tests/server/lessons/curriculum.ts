import { BenchPlace, type PlaceState } from '#server/db/entities/BenchPlace'
import { Cohort } from '#server/db/entities/Cohort'
import { Course } from '#server/db/entities/Course'
import { CourseModule } from '#server/db/entities/CourseModule'
import { Lesson } from '#server/db/entities/Lesson'
import { LessonVersion } from '#server/db/entities/LessonVersion'
import { User } from '#server/db/entities/User'
import { rebuildPassages } from '#server/services/lessons/rebuild-passages'
import type { Actor } from '#server/utils/actor'
import type { LessonDocument, LessonNode } from '#shared/contract/lesson-document'
import { checkDocument } from '#shared/lesson/check-document'
import { withHeadingIds } from '#shared/lesson/with-heading-ids'
import type { TestSchool } from '../review/school'

/** A course of two modules that the school's cohort is in, and lessons of it as a test says. */
export interface Curriculum {
  courseId: string
  /** Puts somebody into the cohort. */
  place: (who: Actor, state: PlaceState, slot: number | null, change?: { accessUntil?: Date, cohortId?: string }) => Promise<string>
  /** A lesson published with these blocks, findable. */
  lesson: (number: number, slug: string, title: string, content: LessonNode[], change?: { module?: number, ops?: number[] }) => Promise<string>
}

export const words = (...text: string[]): LessonNode => ({ type: 'paragraph', content: text.map(one => ({ type: 'text', text: one })) })
export const heading = (text: string, level = 2): LessonNode => ({ type: 'heading', attrs: { level }, content: [{ type: 'text', text }] })
export const documentOf = (...content: LessonNode[]): LessonDocument => ({ type: 'doc', content })

/** A document as it is kept. @throws {Error} on one that is not good */
export function good(...content: LessonNode[]): LessonDocument {
  const { document, issues } = checkDocument(documentOf(...content))
  if (!document) throw new Error(JSON.stringify(issues))
  return withHeadingIds(document)
}

export async function makeCurriculum(school: Pick<TestSchool, 'em' | 'now' | 'cohortId'>): Promise<Curriculum> {
  const began = new Date(school.now().getTime() - 60 * 24 * 3_600_000)
  const { course, modules } = await school.em().transactional(async (tx) => {
    const course = tx.create(Course, { code: 'head-porting', title: 'Cylinder-head porting', summary: 'Heads.', createdAt: began })
    const modules = ['Numbers you can trust', 'Lines and shields'].map((title, index) => tx.create(CourseModule, { course, number: index + 1, title, outcome: `You know ${title.toLowerCase()}.`, gates: [] }))
    tx.persist([course, ...modules])
    await tx.flush()
    await tx.nativeUpdate(Cohort, { id: school.cohortId }, { course: course.id })
    return { course, modules }
  })
  return {
    courseId: course.id,
    place: (who, state, slot, { accessUntil, cohortId = school.cohortId } = {}) => school.em().transactional(async (tx) => {
      const made = tx.create(BenchPlace, { cohort: tx.getReference(Cohort, cohortId), person: tx.getReference(User, who.id), state, slot, createdAt: began, finishedAt: state === 'finished' ? began : null, accessUntil: accessUntil ?? null })
      tx.persist(made)
      return made.id
    }),
    lesson: (number, slug, title, content, { module = 1, ops = [40] } = {}) => school.em().transactional(async (tx) => {
      const of = modules.find(one => one.number === module)
      if (!of) throw new Error(`no module ${module}`)
      const made = tx.create(Lesson, { number, slug, title, module: tx.getReference(CourseModule, of.id), ops, createdAt: began })
      tx.persist([made, tx.create(LessonVersion, { lesson: made, version: 1, title, document: good(...content), minutes: 1, whatChanged: 'First published.', why: 'The course begins with it.', publishedAt: began })])
      await tx.flush()
      await rebuildPassages(tx, made.id)
      return made.id
    }),
  }
}
