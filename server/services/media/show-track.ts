import type { EntityManager } from '@mikro-orm/postgresql'
import { MediaTrack } from '#server/db/entities/MediaTrack'
import type { Actor } from '#server/utils/actor'
import type { App } from '#server/utils/app'
import { Refusal } from '#server/utils/refusal'
import { findMedia } from './find-media'

/** A film's captions or chapters as WebVTT, for the browser's own player. @throws {Refusal} media_not_found, access_ended, not_found */
export async function showTrack(em: EntityManager, app: App, actor: Actor, id: string, kind: MediaTrack['kind'], language: string): Promise<string> {
  const asset = await findMedia(em, app, actor, id)
  const track = await em.findOne(MediaTrack, { asset: asset.id, kind, language })
  if (!track) throw new Refusal('not_found', `This film has no ${kind} in that language.`)
  return track.vtt
}
