import type { EntityManager } from '@mikro-orm/postgresql'
import { FlowSheet, FlowSheetReading } from '#server/db/entities/FlowSheet'
import { visibleHeads } from '#server/services/heads/visible-heads'
import { afterEvidence } from '#server/services/submissions/after-evidence'
import { openForEvidence } from '#server/services/submissions/open-for-evidence'
import type { Actor } from '#server/utils/actor'
import type { App } from '#server/utils/app'
import { recordEvent } from '#server/utils/record-event'
import { Refusal } from '#server/utils/refusal'
import type { SheetView } from '#shared/contract/views'
import { viewSheet } from './view-sheet'

/**
 * Says what is to become of a sheet: `used` when its student has looked at the reading and it is right, `set-aside` when it is to count no
 * more. The file and its readings stay either way, and a new reading brings a sheet back.
 *
 * @throws {Refusal} not_found, whatever `openForEvidence` refuses, sheet_open while a question or a refusal of the reader stands
 */
export async function settleSheet(em: EntityManager, app: App, actor: Actor, id: string, state: 'used' | 'set-aside'): Promise<SheetView> {
  return em.transactional(async (tx) => {
    const found = await tx.findOne(FlowSheet, { id, submission: { head: await visibleHeads(tx, app, actor, 'add') } })
    if (!found) throw new Refusal('not_found')
    const submission = await openForEvidence(tx, app, actor, found.submission.id)
    // Read again now that the submission is locked: it may have been settled or read meanwhile.
    const sheet = await tx.findOneOrFail(FlowSheet, { id }, { refresh: true })
    const [reading] = await tx.find(FlowSheetReading, { sheet: id }, { populate: ['sheet', 'sheet.upload'], orderBy: { version: 'desc' }, limit: 1 })
    if (!reading) throw new Refusal('not_found')
    if (state === 'used' && (reading.needs.length > 0 || reading.findings.some(finding => finding.severity === 'refuse'))) {
      throw new Refusal('sheet_open', undefined, { needs: reading.needs, findings: reading.findings.filter(finding => finding.severity === 'refuse') })
    }
    if (sheet.state !== state) {
      const counted = sheet.state !== 'set-aside'
      sheet.state = state
      recordEvent(tx, { actor: actor.id, action: state === 'used' ? 'sheet-used' : 'sheet-set-aside', subject: `submission:${submission.id}`, detail: { sheet: id, version: reading.version } })
      await tx.flush()
      // Confirming a sheet that counts already changes nothing the submission rests on.
      if (!(counted && state === 'used')) await afterEvidence(tx, app, submission)
    }
    return viewSheet(reading)
  })
}
