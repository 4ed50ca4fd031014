import type { EntityManager } from '@mikro-orm/postgresql'
import { WatchPosition } from '#server/db/entities/WatchPosition'
import type { Actor } from '#server/utils/actor'
import type { App } from '#server/utils/app'
import { Refusal } from '#server/utils/refusal'
import type { MediaView, PositionInput } from '#shared/contract/media'
import { findMedia } from './find-media'

/**
 * Keeps where somebody stopped in a film, for whichever device they open it on next; the last one said counts. Seen to the end once,
 * it stays seen.
 *
 * @throws {Refusal} media_not_found, access_ended, media_no_film
 */
export async function keepPosition(em: EntityManager, app: App, actor: Actor, id: string, { seconds, finished }: PositionInput): Promise<NonNullable<MediaView['position']>> {
  const asset = await findMedia(em, app, actor, id)
  if (asset.kind !== 'video') throw new Refusal('media_no_film', 'Only a film has a spot to go on from.')
  const now = new Date()
  const at = Math.min(seconds, asset.durationSeconds ?? seconds)
  // Two devices may say the first position at once: one statement, not a look and then an insert.
  const row = await em.upsert(WatchPosition, { id: crypto.randomUUID(), person: actor.id, asset: id, seconds: at, updatedAt: now, ...(finished ? { finishedAt: now } : {}) }, {
    onConflictFields: ['person', 'asset'], onConflictAction: 'merge', onConflictExcludeFields: ['id'],
  })
  return { seconds: row.seconds, finished: (row.finishedAt ?? null) !== null }
}
