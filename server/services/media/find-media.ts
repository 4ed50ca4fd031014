import type { EntityManager } from '@mikro-orm/postgresql'
import { Lesson } from '#server/db/entities/Lesson'
import { MediaAsset } from '#server/db/entities/MediaAsset'
import { readableLessons } from '#server/services/lessons/lesson-access'
import { hasRole, type Actor } from '#server/utils/actor'
import type { App } from '#server/utils/app'
import { Refusal } from '#server/utils/refusal'
import { lessonsShowing } from './lessons-showing'

/**
 * A picture or film somebody may see: instructors all of them, everybody else what a lesson they may read shows, in its newest version
 * or in an older one somebody mid-head keeps.
 *
 * @throws {Refusal} media_not_found, or as `readableLessons`
 */
export async function findMedia(em: EntityManager, app: Pick<App, 'clock'>, actor: Actor, id: string): Promise<MediaAsset> {
  if (hasRole(actor, 'instructor')) {
    const asset = await em.findOne(MediaAsset, { id })
    if (!asset) throw new Refusal('media_not_found')
    return asset
  }
  const readable = await readableLessons(em, app, actor)
  const asset = await em.findOne(MediaAsset, { id, state: 'ready' })
  if (!asset || await em.count(Lesson, { $and: [readable, { id: { $in: await lessonsShowing(em, id) } }] }) === 0) throw new Refusal('media_not_found')
  return asset
}
