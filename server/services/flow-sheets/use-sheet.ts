import type { EntityManager } from '@mikro-orm/postgresql'
import { FlowSheetReading } from '#server/db/entities/FlowSheet'
import type { Actor } from '#server/utils/actor'
import type { App } from '#server/utils/app'
import { recordEvent } from '#server/utils/record-event'
import { Refusal } from '#server/utils/refusal'
import { signal } from '#server/utils/signals'
import type { SheetView } from '#shared/contract/views'
import { findSheet } from './find-sheet'
import { viewSheet } from './view-sheet'

/**
 * Somebody has looked at the newest reading of a sheet and says it is what the bench said. Findings that only ask are answered by it;
 * questions are not, and what cannot be right cannot be confirmed.
 *
 * @throws {Refusal} whatever `findSheet` refuses, sheet_set_aside, sheet_open_questions, sheet_cannot_be_right
 */
export async function useSheet(em: EntityManager, app: App, actor: Actor, id: string): Promise<SheetView> {
  return em.transactional(async (tx) => {
    const { sheet, newest, submission } = await findSheet(tx, app, actor, id)
    if (sheet.state === 'set-aside') throw new Refusal('sheet_set_aside')
    if (newest.needs.length > 0) throw new Refusal('sheet_open_questions', newest.needs[0]?.question, { issues: newest.needs.map(need => ({ path: `answers.${need.field}`, message: need.question })) })
    const impossible = newest.findings.find(finding => finding.severity === 'refuse')
    if (impossible) throw new Refusal('sheet_cannot_be_right', impossible.text)
    if (sheet.state !== 'used') {
      sheet.state = 'used'
      recordEvent(tx, { actor: actor.id, action: 'flow-sheet-confirmed', subject: `submission:${submission.id}`, detail: { sheet: id, reading: newest.id, version: newest.version } })
      await tx.flush()
      // It counted already: nothing the score rests on has changed.
      await signal(tx, { kind: 'submission', id: submission.id })
    }
    return viewSheet(await tx.findOneOrFail(FlowSheetReading, newest.id, { populate: ['sheet.upload'] }))
  })
}
