import type { EntityManager } from '@mikro-orm/postgresql'
import { FlowSheet, FlowSheetReading } from '#server/db/entities/FlowSheet'
import { Upload } from '#server/db/entities/Upload'
import { User } from '#server/db/entities/User'
import { afterEvidence } from '#server/services/submissions/after-evidence'
import { openForEvidence } from '#server/services/submissions/open-for-evidence'
import { takeUpload } from '#server/services/uploads/take-upload'
import type { Actor } from '#server/utils/actor'
import type { App } from '#server/utils/app'
import { recordEvent } from '#server/utils/record-event'
import { Refusal } from '#server/utils/refusal'
import type { SheetInput } from '#shared/contract/inputs'
import type { SheetView } from '#shared/contract/views'
import { readSheet, type SheetAsRead } from './read-sheet'
import { viewSheet } from './view-sheet'

/**
 * Files an upload as a flow sheet and reads it; the same upload again is a new reading of it. The raw file and every reading stay.
 *
 * A sheet counts by its newest reading from then on, with what it leaves open: `read` when nothing does, `asked` when a question or a
 * finding that wants an answer stands. Nothing is kept out of the score because of a finding: what cannot be right is for the criteria
 * to reject and for the instructor to see.
 *
 * @returns `first` when the sheet is new
 * @throws {Refusal} whatever `openForEvidence`, `takeUpload` and `readSheet` refuse, sheet_set_aside
 */
export async function addFlowSheet(em: EntityManager, app: App, actor: Actor, submissionId: string, input: SheetInput): Promise<{ sheet: SheetView, first: boolean }> {
  return em.transactional(async (tx) => {
    const submission = await openForEvidence(tx, app, actor, submissionId)
    // By the submission and not by the upload's owner: an instructor answers for a student, and the other way round.
    const known = await tx.findOne(FlowSheet, { submission: submission.id, upload: input.uploadId })
    if (known?.state === 'set-aside') throw new Refusal('sheet_set_aside')
    const before = known && await tx.findOne(FlowSheetReading, { sheet: known.id }, { orderBy: { version: 'desc' } })
    const id = known?.id ?? crypto.randomUUID()
    const upload = known ? await tx.findOneOrFail(Upload, known.upload.id) : await takeUpload(tx, actor, input.uploadId, 'flow-sheet', `flow-sheet:${id}`)
    const sheet = known ?? tx.create(FlowSheet, { id, submission, upload, state: 'raw', addedBy: tx.getReference(User, actor.id), addedAt: app.clock.schoolNow() })
    if (!known) tx.persist(sheet)

    const asRead = await readSheet(tx, app, submission, sheet, upload, input, before)
    sheet.state = isOpen(asRead) ? 'asked' : 'read'
    const reading = tx.create(FlowSheetReading, { ...asRead, sheet, version: (before?.version ?? 0) + 1, readAt: app.clock.schoolNow() })
    tx.persist(reading)
    await tx.flush()
    recordEvent(tx, { actor: actor.id, action: known ? 'flow-sheet-read-again' : 'flow-sheet-added', subject: `submission:${submission.id}`, detail: { sheet: id, reading: reading.id, version: reading.version, sha256: upload.sha256, method: reading.method } })
    await afterEvidence(tx, app, submission)
    return { sheet: viewSheet(await tx.findOneOrFail(FlowSheetReading, reading.id, { populate: ['sheet.upload'] })), first: known === null }
  })
}

function isOpen({ needs, findings }: Pick<SheetAsRead, 'needs' | 'findings'>): boolean {
  return needs.length > 0 || findings.some(finding => finding.severity !== 'note')
}
