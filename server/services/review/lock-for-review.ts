import type { EntityManager } from '@mikro-orm/postgresql'
import { Submission } from '#server/db/entities/Submission'
import type { FoundSubmission } from '#server/services/submissions/find-submission'
import type { Actor } from '#server/utils/actor'
import { Refusal } from '#server/utils/refusal'
import { staffLinks } from './staff-links'

export interface Reviewable { submission: FoundSubmission, mayPoints: Set<string> }

const populate = ['head', 'head.student', 'head.casting', 'head.rubric', 'head.cohort'] as const

/**
 * A submission of a cohort the person teaches, with head, casting, rubric and student, and the points they may sign there.
 *
 * @throws {Refusal} submission_not_found for any other
 */
export async function findForReview(em: EntityManager, actor: Actor, id: string, schoolNow: Date): Promise<Reviewable> {
  const links = await staffLinks(em, actor, schoolNow)
  const submission = await em.findOne(Submission, { id, head: { cohort: { $in: [...links.keys()] } } }, { populate, refresh: true })
  const cohort = submission?.head.$.cohort?.id
  if (!submission || !cohort) throw new Refusal('submission_not_found')
  return { submission, mayPoints: links.get(cohort) ?? new Set() }
}

/**
 * The same, with the head and all its submissions held until the transaction ends: what is decided on cannot move meanwhile.
 * The head first, then its submissions in the order of their ids, so that two reviews never wait for each other crosswise.
 */
export async function lockForReview(tx: EntityManager, actor: Actor, id: string, schoolNow: Date): Promise<Reviewable> {
  const { submission } = await findForReview(tx, actor, id, schoolNow)
  const lock = (sql: string) => tx.getConnection().execute(sql, [submission.head.id], 'all', tx.getTransactionContext())
  await lock('select id from practice_head where id = ? for update')
  await lock('select id from submission where head_id = ? order by id for update')
  return findForReview(tx, actor, id, schoolNow)
}
