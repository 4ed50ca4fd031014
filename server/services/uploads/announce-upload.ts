import { randomBytes } from 'node:crypto'
import type { EntityManager } from '@mikro-orm/postgresql'
import { partsAboveBytes } from '#server/adapters/storage/storage'
import { Upload } from '#server/db/entities/Upload'
import { User } from '#server/db/entities/User'
import { hasRole, type Actor } from '#server/utils/actor'
import type { App } from '#server/utils/app'
import { Refusal } from '#server/utils/refusal'
import type { UploadInput } from '#shared/contract/inputs'
import { bytesADay, largestUpload, openUploads } from '#shared/contract/upload-limits'
import { signUpload, type SignedUpload } from './sign-upload'

/**
 * Makes room for a file: a row, a key nobody can guess, and signed addresses the browser sends it to.
 *
 * @throws {Refusal} upload_too_large, upload_too_many, or not_allowed for lesson media by anybody but an instructor
 */
export async function announceUpload(em: EntityManager, app: App, actor: Actor, input: UploadInput): Promise<SignedUpload> {
  if (input.purpose === 'lesson-media' && !hasRole(actor, 'instructor')) throw new Refusal('not_allowed')
  if (input.bytes > largestUpload[input.purpose]) throw new Refusal('upload_too_large', `A ${input.purpose} may have at most ${largestUpload[input.purpose] / 1024 ** 2} MB.`)
  return em.transactional(async (tx) => {
    // One at a time a person, so that two announcements cannot both see room for one.
    await tx.getConnection().execute('select pg_advisory_xact_lock(hashtextextended(?, 1))', [actor.id], 'run', tx.getTransactionContext())
    const now = new Date()
    const open = await tx.count(Upload, { owner: actor.id, state: 'open', createdAt: { $gt: new Date(now.getTime() - 24 * 3600_000) } })
    if (open >= openUploads) throw new Refusal('upload_too_many')
    const today = await tx.find(Upload, { owner: actor.id, createdAt: { $gt: new Date(now.getTime() - 24 * 3600_000) } }, { fields: ['bytes'] })
    if (today.reduce((sum, one) => sum + one.bytes, input.bytes) > bytesADay) throw new Refusal('upload_too_many', 'That is more than 2 GB in one day. Go on tomorrow, or send smaller files.')

    const key = `${input.purpose}/${randomBytes(24).toString('base64url')}`
    const multipartId = input.bytes > partsAboveBytes ? await app.storage.startParts({ key, bytes: input.bytes, contentType: input.contentType, sha256: input.sha256 }) : null
    const upload = tx.create(Upload, { owner: tx.getReference(User, actor.id), ...input, key, multipartId, state: 'open', createdAt: now })
    tx.persist(upload)
    return signUpload(app, upload)
  })
}
