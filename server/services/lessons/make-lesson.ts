import type { EntityManager } from '@mikro-orm/postgresql'
import { CourseModule } from '#server/db/entities/CourseModule'
import { Lesson } from '#server/db/entities/Lesson'
import type { Actor } from '#server/utils/actor'
import { recordEvent } from '#server/utils/record-event'
import { Refusal } from '#server/utils/refusal'
import type { LessonInput, LessonMade } from '#shared/contract/lessons'
import { headingAddress } from '#shared/lesson/heading-address'

/** A lesson to be written: numbered after the last, at an address made of its title. Nobody reads it until it is published. @throws {Refusal} module_unknown */
export async function makeLesson(em: EntityManager, actor: Actor, { title, module: number, course, ops }: LessonInput): Promise<LessonMade> {
  return em.transactional(async (tx) => {
    // One at a time: numbers have no gap and addresses no double.
    await tx.getConnection().execute('select pg_advisory_xact_lock(hashtextextended(\'lesson-made\', 0))', [], 'run', tx.getTransactionContext())
    const modules = await tx.find(CourseModule, { number, ...(course === undefined ? {} : { course: { code: course } }) })
    const [module, another] = modules
    if (!module || another) throw new Refusal('module_unknown')
    const [last] = await tx.find(Lesson, {}, { orderBy: { number: 'desc' }, limit: 1 })
    const wanted = headingAddress(title).slice(0, 70)
    const taken = new Set((await tx.find(Lesson, { slug: { $like: `${wanted}%` } })).map(one => one.slug))
    let slug = wanted
    for (let n = 2; taken.has(slug); n += 1) slug = `${wanted}-${n}`
    const lesson = tx.create(Lesson, { number: (last?.number ?? 0) + 1, slug, title, module, ops: [...new Set(ops)].sort((a, b) => a - b), createdAt: new Date() })
    tx.persist(lesson)
    recordEvent(tx, { actor: actor.id, action: 'lesson-made', subject: `lesson:${lesson.id}`, detail: { number: lesson.number } })
    return { slug, number: lesson.number }
  })
}
