import { LockMode, type EntityManager } from '@mikro-orm/postgresql'
import { Submission } from '#server/db/entities/Submission'

/** A submission, locked, for work that no person asks for. */
export function findForJob(tx: EntityManager, id: string): Promise<Submission> {
  return tx.findOneOrFail(Submission, { id }, { lockMode: LockMode.PESSIMISTIC_WRITE })
}
