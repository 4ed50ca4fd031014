import type { EntityManager } from '@mikro-orm/postgresql'
import { Submission } from '#server/db/entities/Submission'
import { afterEvidence } from '#server/services/submissions/after-evidence'
import { findForJob } from '#server/services/submissions/find-for-job'
import type { Actor } from '#server/utils/actor'
import type { App } from '#server/utils/app'
import { recordEvent } from '#server/utils/record-event'
import { findHead } from './find-head'

/**
 * Says whether a core came from acid cleaning, which decides whether its rinse water has to be proved neutral. A proof of the cleaning
 * that was asked already is scored again.
 *
 * @throws {Refusal} head_not_found
 */
export async function sayAcidCleaned(em: EntityManager, app: App, actor: Actor, headId: string, acidCleaned: boolean): Promise<{ id: string, acidCleaned: boolean }> {
  return em.transactional(async (tx) => {
    const head = await findHead(tx, app, actor, headId, { purpose: 'add', lock: true })
    if (head.acidCleaned !== acidCleaned) {
      head.acidCleaned = acidCleaned
      recordEvent(tx, { actor: actor.id, action: 'acid-cleaning-told', subject: `head:${head.id}`, detail: { acidCleaned } })
      await tx.flush()
      for (const open of await tx.find(Submission, { head: head.id, op: 20, state: { $ne: 'decided' } })) await afterEvidence(tx, app, await findForJob(tx, open.id))
    }
    return { id: head.id, acidCleaned }
  })
}
