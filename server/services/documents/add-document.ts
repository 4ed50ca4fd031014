import type { EntityManager } from '@mikro-orm/postgresql'
import { EvidenceDocument } from '#server/db/entities/EvidenceDocument'
import { User } from '#server/db/entities/User'
import { afterEvidence } from '#server/services/submissions/after-evidence'
import { openForEvidence } from '#server/services/submissions/open-for-evidence'
import { takeUpload } from '#server/services/uploads/take-upload'
import type { Actor } from '#server/utils/actor'
import type { App } from '#server/utils/app'
import { recordEvent } from '#server/utils/record-event'
import type { DocumentView } from '#shared/contract/views'
import { viewDocument } from './view-document'

/**
 * Files a document (damage list, signed caution card, route card) as evidence.
 *
 * @throws {Refusal} whatever `openForEvidence` and `takeUpload` refuse
 */
export async function addDocument(em: EntityManager, app: App, actor: Actor, submissionId: string, input: { uploadId: string, note: string }): Promise<DocumentView> {
  return em.transactional(async (tx) => {
    const submission = await openForEvidence(tx, app, actor, submissionId)
    const id = crypto.randomUUID()
    const upload = await takeUpload(tx, actor, input.uploadId, 'document', `document:${id}`)
    const document = tx.create(EvidenceDocument, { id, submission, upload, note: input.note, addedBy: tx.getReference(User, actor.id), addedAt: app.clock.schoolNow() })
    tx.persist(document)
    recordEvent(tx, { actor: actor.id, action: 'document-added', subject: `submission:${submission.id}`, detail: { document: id, sha256: upload.sha256 } })
    await tx.flush()
    await afterEvidence(tx, app, submission)
    return viewDocument(await tx.findOneOrFail(EvidenceDocument, { id }, { populate: ['upload'] }))
  })
}
