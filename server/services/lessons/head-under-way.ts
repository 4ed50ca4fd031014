import type { EntityManager } from '@mikro-orm/postgresql'
import { PracticeHead } from '#server/db/entities/PracticeHead'

export interface HeadUnderWay { student: string, receivedAt: Date }

/**
 * The heads people are in the middle of, of a cohort they are here for: one a person, the one handed out last. Somebody mid-head keeps
 * to the lessons as they were when they began.
 *
 * @param person only this one's; everybody's when left out
 */
export async function headsUnderWay(em: EntityManager, person?: string): Promise<Map<string, HeadUnderWay>> {
  const rows = await em.getConnection().execute<{ student_id: string, received_at: Date }[]>(`
    select distinct on (head.student_id) head.student_id, head.received_at
      from practice_head head join bench_place place on place.cohort_id = head.cohort_id and place.person_id = head.student_id
     where head.state in ('received', 'working') and place.state = 'here' ${person === undefined ? '' : 'and head.student_id = ?'}
     order by head.student_id, head.received_at desc`, person === undefined ? [] : [person], 'all', em.getTransactionContext())
  return new Map(rows.map(row => [row.student_id, { student: row.student_id, receivedAt: new Date(row.received_at) }]))
}

/** The head whose casting and rubric a student's limits are for: the one under way, else the one handed out last. */
export async function headOfReader(em: EntityManager, person: string) {
  const heads = await em.find(PracticeHead, { student: person }, { populate: ['casting', 'rubric'], orderBy: { receivedAt: 'desc', number: 'desc' } })
  return heads.find(head => head.state === 'received' || head.state === 'working') ?? heads[0] ?? null
}
