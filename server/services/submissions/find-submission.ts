import { LockMode, type EntityManager, type FilterQuery, type Loaded } from '@mikro-orm/postgresql'
import { Submission } from '#server/db/entities/Submission'
import { visibleHeads, type HeadPurpose } from '#server/services/heads/visible-heads'
import type { Actor } from '#server/utils/actor'
import type { App } from '#server/utils/app'
import { Refusal } from '#server/utils/refusal'

export type FoundSubmission = Loaded<Submission, 'head' | 'head.student' | 'head.cohort' | 'head.casting' | 'head.rubric'>

/**
 * A submission this person may have for that purpose, with its head, casting and rubric.
 *
 * @throws {Refusal} submission_not_found
 */
export async function findSubmission(em: EntityManager, app: Pick<App, 'clock'>, actor: Actor, id: string, { purpose = 'see', lock = false }: { purpose?: HeadPurpose, lock?: boolean } = {}): Promise<FoundSubmission> {
  const where: FilterQuery<Submission> = { id, head: await visibleHeads(em, app, actor, purpose) }
  const found = await em.findOne(Submission, where)
  if (!found) throw new Refusal('submission_not_found')
  // Locked by its id alone: FOR UPDATE over the joined head would lock that too, in no fixed order.
  if (lock) await em.refresh(found, { lockMode: LockMode.PESSIMISTIC_WRITE })
  await em.populate(found, ['head', 'head.student', 'head.cohort', 'head.casting', 'head.rubric'])
  return found as FoundSubmission
}
