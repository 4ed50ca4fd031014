import type { EntityManager } from '@mikro-orm/postgresql'
import type { Actor } from '#server/utils/actor'
import type { App } from '#server/utils/app'
import { Refusal } from '#server/utils/refusal'
import { findPhoto } from './find-photo'

/**
 * A 60 s address of one of a photo's pictures. The original, which still says where it was taken, goes only to its student and their
 * instructors, and only to be saved.
 *
 * @throws {Refusal} not_found
 */
export async function showPicture(em: EntityManager, app: App, actor: Actor, id: string, size: 'thumb' | 'preview' | 'original'): Promise<{ url: string }> {
  const { photo, mine } = await findPhoto(em, app, actor, id)
  const upload = photo.upload.$
  if (size === 'original') {
    if (!mine) throw new Refusal('not_found')
    return { url: await app.storage.signGet({ key: upload.key, contentType: upload.detectedType ?? 'application/octet-stream', filename: upload.filename, disposition: 'attachment' }) }
  }
  const key = size === 'thumb' ? photo.thumbKey : photo.previewKey
  if (!key) throw new Refusal('not_found', 'This picture is still being prepared.')
  return { url: await app.storage.signGet({ key, contentType: 'image/webp', filename: `${photo.view}.webp`, disposition: 'inline' }) }
}
