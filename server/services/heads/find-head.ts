import { LockMode, type EntityManager, type FilterQuery, type Loaded } from '@mikro-orm/postgresql'
import { PracticeHead } from '#server/db/entities/PracticeHead'
import type { Actor } from '#server/utils/actor'
import type { App } from '#server/utils/app'
import { Refusal } from '#server/utils/refusal'
import { visibleHeads, type HeadPurpose } from './visible-heads'

export type FoundHead = Loaded<PracticeHead, 'student' | 'cohort' | 'casting' | 'rubric'>

/**
 * A head this person may have for that purpose, with its student, cohort, casting and rubric.
 *
 * @throws {Refusal} head_not_found
 */
export async function findHead(em: EntityManager, app: Pick<App, 'clock'>, actor: Actor, id: string, { purpose = 'see', lock = false }: { purpose?: HeadPurpose, lock?: boolean } = {}): Promise<FoundHead> {
  const where: FilterQuery<PracticeHead> = { $and: [{ id }, await visibleHeads(em, app, actor, purpose)] }
  const head = await em.findOne(PracticeHead, where, lock ? { lockMode: LockMode.PESSIMISTIC_WRITE, refresh: true } : {})
  if (!head) throw new Refusal('head_not_found')
  return em.populate(head, ['student', 'cohort', 'casting', 'rubric']).then(() => head as FoundHead)
}
