import type { EntityManager } from '@mikro-orm/postgresql'
import { MediaAsset } from '#server/db/entities/MediaAsset'
import type { Upload } from '#server/db/entities/Upload'
import { User } from '#server/db/entities/User'
import { takeUpload } from '#server/services/uploads/take-upload'
import type { Actor } from '#server/utils/actor'
import type { App } from '#server/utils/app'
import { enqueue } from '#server/utils/enqueue'
import { recordEvent } from '#server/utils/record-event'
import { Refusal } from '#server/utils/refusal'
import type { MediaInput, MediaView } from '#shared/contract/media'
import { largestUpload } from '#shared/contract/upload-limits'
import { viewMedia } from './view-media'

type Shown = Pick<MediaAsset, 'kind' | 'key' | 'contentType' | 'bytes' | 'width' | 'height' | 'durationSeconds' | 'state'>

/**
 * Makes an upload a picture or film that lessons may show. A picture is drawn anew, so that nothing but its pixels is left; of a film
 * the file as it came is shown. A film that came in parts waits until a job has read it whole.
 *
 * @throws {Refusal} what `takeUpload` refuses, upload_wrong_type, upload_too_large, picture_unreadable, picture_too_large
 */
export async function addMedia(em: EntityManager, app: App, actor: Actor, input: MediaInput): Promise<MediaView> {
  return em.transactional(async (tx) => {
    const id = crypto.randomUUID()
    const upload = await takeUpload(tx, actor, input.uploadId, 'lesson-media', `media:${id}`)
    const shown = upload.detectedType?.startsWith('image/') ? await drawAnew(app, upload) : filmOf(upload, input)
    const asset = tx.create(MediaAsset, { id, ...shown, title: input.title, name: null, upload, problem: null, addedBy: tx.getReference(User, actor.id), addedAt: new Date() })
    tx.persist(asset)
    recordEvent(tx, { actor: actor.id, action: 'media-added', subject: `media:${id}`, detail: { kind: shown.kind, sha256: upload.sha256 } })
    await tx.flush()
    if (shown.state === 'being checked') await enqueue(app, tx, 'hash-media', { mediaId: id })
    const [view] = await viewMedia(tx, actor.id, [asset])
    if (!view) throw new Error(`media ${id} was made and is not there`)
    return view
  })
}

async function drawAnew(app: App, upload: Upload): Promise<Shown> {
  // It is read whole to be drawn; films are not.
  if (upload.bytes > largestUpload.photo) throw new Refusal('upload_too_large', `A picture may have at most ${largestUpload.photo / 1024 ** 2} MB. Send a smaller copy.`)
  const { preview } = await app.imaging.renditions(await app.storage.read(upload.key))
  const key = `${upload.key}.shown.webp`
  await app.storage.put({ key, body: preview.body, contentType: preview.contentType })
  return { kind: 'image', key, contentType: preview.contentType, bytes: preview.body.byteLength, width: preview.widthPx, height: preview.heightPx, durationSeconds: null, state: 'ready' }
}

function filmOf(upload: Upload, input: MediaInput): Shown {
  const contentType = upload.detectedType
  if (contentType !== 'video/mp4' && contentType !== 'video/webm') throw new Refusal('upload_wrong_type', `"${upload.filename}" is neither a picture nor a film a lesson can show. Send JPEG, PNG or WebP, or a film as MP4 or WebM.`)
  return {
    kind: 'video', key: upload.key, contentType, bytes: upload.bytes, width: input.width ?? null, height: input.height ?? null, durationSeconds: input.durationSeconds ?? null,
    state: upload.multipartId === null ? 'ready' : 'being checked',
  }
}
