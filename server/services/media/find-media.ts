import type { EntityManager } from '@mikro-orm/postgresql'
import { MediaAsset } from '#server/db/entities/MediaAsset'
import { mayReadLessons } from './may-read-lessons'
import { hasRole, type Actor } from '#server/utils/actor'
import type { App } from '#server/utils/app'
import { Refusal } from '#server/utils/refusal'

/**
 * A picture or film somebody may see: instructors all of them, everybody else what a published lesson shows, while they may read
 * lessons at all.
 *
 * @throws {Refusal} media_not_found, access_ended
 */
export async function findMedia(em: EntityManager, app: Pick<App, 'clock'>, actor: Actor, id: string): Promise<MediaAsset> {
  const asset = await em.findOne(MediaAsset, { id })
  if (!asset) throw new Refusal('media_not_found')
  if (hasRole(actor, 'instructor')) return asset
  await mayReadLessons(em, app, actor)
  if (asset.state !== 'ready' || !await isPublished(em, id)) throw new Refusal('media_not_found')
  return asset
}

/** Whether any published version shows it: somebody mid-head reads an older one. */
async function isPublished(em: EntityManager, id: string): Promise<boolean> {
  // Written with the operator, so that the index on the documents serves it.
  const rows = await em.getConnection().execute<unknown[]>('select 1 from lesson_version where document @\\? ?::jsonpath limit 1', [`$.**.asset ? (@ == "${id}")`], 'all', em.getTransactionContext())
  return rows.length > 0
}
