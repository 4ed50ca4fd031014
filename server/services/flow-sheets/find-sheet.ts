import type { EntityManager } from '@mikro-orm/postgresql'
import { FlowSheet, FlowSheetReading } from '#server/db/entities/FlowSheet'
import { visibleHeads } from '#server/services/heads/visible-heads'
import type { FoundSubmission } from '#server/services/submissions/find-submission'
import { openForEvidence } from '#server/services/submissions/open-for-evidence'
import type { Actor } from '#server/utils/actor'
import type { App } from '#server/utils/app'
import { Refusal } from '#server/utils/refusal'

/**
 * A flow sheet of a head this person may add evidence to, with its newest reading and its submission locked.
 *
 * @throws {Refusal} sheet_not_found, and whatever `openForEvidence` refuses
 */
export async function findSheet(tx: EntityManager, app: App, actor: Actor, id: string): Promise<{ sheet: FlowSheet, newest: FlowSheetReading, submission: FoundSubmission }> {
  const where = { id, submission: { head: await visibleHeads(tx, app, actor, 'add') } }
  const found = await tx.findOne(FlowSheet, where)
  if (!found) throw new Refusal('sheet_not_found')
  const submission = await openForEvidence(tx, app, actor, found.submission.id)
  // What it was before the lock may be old.
  const sheet = await tx.findOneOrFail(FlowSheet, { id }, { refresh: true })
  return { sheet, newest: await tx.findOneOrFail(FlowSheetReading, { sheet: id }, { orderBy: { version: 'desc' } }), submission }
}
