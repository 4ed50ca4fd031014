import type { Loaded } from '@mikro-orm/postgresql'
import type { EvidenceDocument } from '#server/db/entities/EvidenceDocument'
import type { App } from '#server/utils/app'
import type { DocumentView } from '#shared/contract/views'

/** A document as pages show it; its address saves the file and never opens it in place. */
export async function viewDocument(app: Pick<App, 'storage'>, document: Loaded<EvidenceDocument, 'upload'>): Promise<DocumentView> {
  const { key, filename, detectedType } = document.upload.$
  return {
    id: document.id,
    filename,
    note: document.note,
    addedAt: document.addedAt.toISOString(),
    url: await app.storage.signGet({ key, contentType: detectedType ?? 'application/octet-stream', filename, disposition: 'attachment' }),
  }
}
