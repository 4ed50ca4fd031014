import type { EntityManager } from '@mikro-orm/postgresql'
import { afterEvidence } from '#server/services/submissions/after-evidence'
import type { Actor } from '#server/utils/actor'
import type { App } from '#server/utils/app'
import { recordEvent } from '#server/utils/record-event'
import { findSheet } from './find-sheet'

/**
 * Takes a flow sheet out of the evidence. The file and its readings stay; they only no longer count.
 *
 * @throws {Refusal} whatever `findSheet` refuses
 */
export async function setSheetAside(em: EntityManager, app: App, actor: Actor, id: string): Promise<{ id: string }> {
  return em.transactional(async (tx) => {
    const { sheet, submission } = await findSheet(tx, app, actor, id)
    if (sheet.state === 'set-aside') return { id }
    sheet.state = 'set-aside'
    recordEvent(tx, { actor: actor.id, action: 'flow-sheet-set-aside', subject: `submission:${submission.id}`, detail: { sheet: id } })
    await tx.flush()
    await afterEvidence(tx, app, submission)
    return { id }
  })
}
