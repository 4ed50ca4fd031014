import type { Loaded } from '@mikro-orm/postgresql'
import type { EvidenceDocument } from '#server/db/entities/EvidenceDocument'
import type { DocumentView } from '#shared/contract/views'

/** A document as pages show it; its address signs anew each time. */
export function viewDocument(document: Loaded<EvidenceDocument, 'upload'>): DocumentView {
  return { id: document.id, filename: document.upload.$.filename, note: document.note, addedAt: document.addedAt.toISOString(), url: `/api/documents/${document.id}/file` }
}
