import type { EntityManager } from '@mikro-orm/postgresql'
import type { StoredObject } from '#server/adapters/storage/storage'
import type { Upload } from '#server/db/entities/Upload'
import type { Actor } from '#server/utils/actor'
import type { App } from '#server/utils/app'
import { Refusal } from '#server/utils/refusal'
import { typesOf } from '#shared/contract/upload-limits'
import { findUpload } from './find-upload'

/** Files up to this are hashed anew when storage did not hash them whole; a lesson's film is, by a job of its own. */
const hashedHere = 64 * 1024 ** 2

/**
 * Looks at what storage really has: size, SHA-256 and the type its bytes show. A file that is not what was announced is removed and
 * its upload refused; a missing one can still be sent. Said twice, it answers the same.
 *
 * @throws {Refusal} upload_not_found, upload_incomplete, upload_differs, upload_wrong_type, upload_used
 */
export async function completeUpload(em: EntityManager, app: App, actor: Actor, id: string, parts: readonly { n: number, etag: string }[]): Promise<{ id: string, state: 'received' }> {
  const upload = await findUpload(em, actor, id)
  if (upload.state === 'received') return { id, state: 'received' }
  if (upload.state === 'used') throw new Refusal('upload_used')
  if (upload.state === 'refused') throw new Refusal('upload_differs')

  const stored = await fetchStored(app, upload, parts)
  const refusal = await whatIsWrong(app, upload, stored)
  // A refusal is kept although the call answers with it, so it is written on a connection of its own.
  const own = app.orm.em.fork()
  await own.transactional(async (tx) => {
    const row = await findUpload(tx, actor, id, { lock: true })
    if (row.state !== 'open') return
    row.state = refusal instanceof Refusal ? 'refused' : 'received'
    row.receivedAt = new Date()
    if (typeof refusal === 'string') row.detectedType = refusal
  })
  if (refusal instanceof Refusal) {
    await app.storage.remove(upload.key)
    throw refusal
  }
  return { id, state: 'received' }
}

async function fetchStored(app: App, upload: Upload, parts: readonly { n: number, etag: string }[]): Promise<StoredObject> {
  if (upload.multipartId && !await app.storage.head(upload.key)) {
    const there = parts.length > 0 ? parts : await app.storage.partsThere({ key: upload.key, multipartId: upload.multipartId })
    await app.storage.completeParts({ key: upload.key, multipartId: upload.multipartId, parts: there })
  }
  const stored = await app.storage.head(upload.key)
  if (!stored) throw new Refusal('upload_incomplete')
  return stored
}

/** The detected type, or why the file is refused. */
async function whatIsWrong(app: App, upload: Upload, stored: StoredObject): Promise<string | Refusal> {
  if (stored.bytes !== upload.bytes) return new Refusal('upload_differs', `${upload.bytes} bytes were announced and ${stored.bytes} arrived. Send the file again.`)
  const sha256 = stored.sha256 ?? (upload.bytes <= hashedHere && upload.purpose !== 'lesson-media' ? await app.storage.sha256Of(upload.key) : null)
  if (sha256 !== null && sha256 !== upload.sha256) return new Refusal('upload_differs')
  const first = await app.storage.readRange(upload.key, 0, 4095)
  const type = await app.imaging.detectType(first)
  if (typesOf[upload.purpose].includes(type)) return type
  if (type === 'image/svg+xml' || type === 'text/html') return new Refusal('upload_wrong_type', `"${upload.filename}" is ${type === 'text/html' ? 'a web page' : 'an SVG drawing'}, whatever its name says, and may carry a program. Send the picture as JPEG, PNG or WebP.`)
  return new Refusal('upload_wrong_type', `"${upload.filename}" is ${type === 'application/octet-stream' ? 'of no kind we know' : type}, and a ${upload.purpose} cannot be that.`)
}
