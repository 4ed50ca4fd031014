import type { EntityManager } from '@mikro-orm/postgresql'
import { FlowSheet, FlowSheetReading } from '#server/db/entities/FlowSheet'
import { User } from '#server/db/entities/User'
import { afterEvidence } from '#server/services/submissions/after-evidence'
import type { FoundSubmission } from '#server/services/submissions/find-submission'
import { openForEvidence } from '#server/services/submissions/open-for-evidence'
import { takeUpload } from '#server/services/uploads/take-upload'
import type { Actor } from '#server/utils/actor'
import type { App } from '#server/utils/app'
import { recordEvent } from '#server/utils/record-event'
import type { SheetInput } from '#shared/contract/inputs'
import type { SheetView } from '#shared/contract/views'
import { baselineHeaders } from './baseline-header'
import { readSheet, sheetMethod, type ReadSheet } from './read-sheet'
import { mergeAnswers } from './sheet-choices'
import { sheetTables } from './sheet-tables'
import { viewSheet } from './view-sheet'

/**
 * Reads a flow sheet, or reads the same file once more with what was answered since. The file stays as it came; every reading is kept and
 * the newest counts.
 *
 * A sheet counts from its first reading on, with its findings and open questions: what looks wrong is for the rubric and the instructor
 * to judge, and nobody has to confirm a sheet for it to be scored. `read` says that nothing is open, `asked` that something is.
 *
 * @throws {Refusal} whatever `openForEvidence` and `takeUpload` refuse, input_invalid
 * @throws {AdapterRefusal} sheet_unreadable, sheet_too_large
 */
export async function addSheet(em: EntityManager, app: App, actor: Actor, submissionId: string, input: SheetInput): Promise<{ isNew: boolean, sheet: SheetView }> {
  return em.transactional(async (tx) => {
    const submission = await openForEvidence(tx, app, actor, submissionId)
    const known = await tx.findOne(FlowSheet, { upload: input.uploadId, submission: submission.id }, { populate: ['upload'] })
    const sheet = known ?? await newSheet(tx, app, actor, submission, input.uploadId)
    const before = known ? await tx.findOne(FlowSheetReading, { sheet: known.id }, { orderBy: { version: 'desc' } }) : null
    const answers = mergeAnswers(before?.answers ?? {}, input)

    const upload = sheet.upload.$
    const tables = await sheetTables(await app.storage.read(upload.key), upload.detectedType ?? '')
    const head = submission.head.$
    const read = readSheet(tables, answers, { number: head.number, op: submission.op, card: head.casting.$.card, baselineOf: await baselineHeaders(tx, head.id, submission.op) })
    const reading = tx.create(FlowSheetReading, { sheet, version: (before?.version ?? 0) + 1, ...read, answers, method: sheetMethod, readAt: app.clock.schoolNow() })
    sheet.state = isOpen(read) ? 'asked' : 'read'
    tx.persist(reading)
    recordEvent(tx, { actor: actor.id, action: known ? 'sheet-read-again' : 'sheet-added', subject: `submission:${submission.id}`, detail: { sheet: sheet.id, version: reading.version, sha256: upload.sha256, findings: read.findings.map(finding => finding.code) } })
    await tx.flush()
    await afterEvidence(tx, app, submission)
    return { isNew: known === null, sheet: viewSheet(await tx.findOneOrFail(FlowSheetReading, { id: reading.id }, { populate: ['sheet', 'sheet.upload'] })) }
  })
}

async function newSheet(tx: EntityManager, app: App, actor: Actor, submission: FoundSubmission, uploadId: string) {
  const id = crypto.randomUUID()
  const upload = await takeUpload(tx, actor, uploadId, 'flow-sheet', `flow-sheet:${id}`)
  tx.persist(tx.create(FlowSheet, { id, submission, upload, addedBy: tx.getReference(User, actor.id), addedAt: app.clock.schoolNow() }))
  await tx.flush()
  return tx.findOneOrFail(FlowSheet, { id }, { populate: ['upload'] })
}

/** Whether something of a sheet is still for a person to answer or to take again. */
function isOpen(read: Pick<ReadSheet, 'needs' | 'findings'>): boolean {
  return read.needs.length > 0 || read.findings.some(finding => finding.severity !== 'note')
}
