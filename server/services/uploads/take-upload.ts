import type { EntityManager } from '@mikro-orm/postgresql'
import type { Upload, UploadPurpose } from '#server/db/entities/Upload'
import type { Actor } from '#server/utils/actor'
import { Refusal } from '#server/utils/refusal'
import { findUpload } from './find-upload'

/**
 * Takes an upload for the one thing it was made for, inside the transaction that makes that thing.
 * `usedBy` names it: "photo:<id>".
 *
 * @throws {Refusal} upload_not_found, upload_wrong_purpose, upload_used, upload_not_received
 */
export async function takeUpload(tx: EntityManager, actor: Actor, id: string, purpose: UploadPurpose, usedBy: string): Promise<Upload> {
  const upload = await findUpload(tx, actor, id, { lock: true })
  if (upload.purpose !== purpose) throw new Refusal('upload_wrong_purpose')
  if (upload.state === 'used') throw new Refusal('upload_used')
  if (upload.state !== 'received') throw new Refusal('upload_not_received')
  upload.state = 'used'
  upload.usedAt = new Date()
  upload.usedBy = usedBy
  return upload
}
