import type { EntityManager } from '@mikro-orm/postgresql'
import type { Actor } from '#server/utils/actor'
import type { App } from '#server/utils/app'
import { Refusal } from '#server/utils/refusal'
import { findMedia } from './find-media'

/**
 * A 60 s address of the picture or film, from which storage serves any range of it. A film longer than that asks here again when
 * storage no longer answers.
 *
 * @throws {Refusal} media_not_found, media_not_ready
 */
export async function showMedia(em: EntityManager, app: App, actor: Actor, id: string): Promise<{ url: string }> {
  const asset = await findMedia(em, app, actor, id)
  if (asset.state !== 'ready') throw new Refusal('media_not_ready', asset.problem ?? 'This film is still being checked. Look again in a minute.')
  const { key, contentType, kind } = asset
  const filename = `${asset.title}.${contentType.split('/')[1] ?? 'bin'}`
  // A picture is the copy drawn here; a film is somebody's file, and plays as well when its address opened by itself would save it.
  return { url: await app.storage.signGet({ key, contentType, filename, disposition: kind === 'image' ? 'inline' : 'attachment' }) }
}
