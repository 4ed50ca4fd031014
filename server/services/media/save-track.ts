import { LockMode, type EntityManager } from '@mikro-orm/postgresql'
import { MediaAsset } from '#server/db/entities/MediaAsset'
import { MediaTrack } from '#server/db/entities/MediaTrack'
import { User } from '#server/db/entities/User'
import type { Actor } from '#server/utils/actor'
import { recordEvent } from '#server/utils/record-event'
import { Refusal } from '#server/utils/refusal'
import type { MediaView, TrackInput } from '#shared/contract/media'
import { rebuildPassages } from '#server/services/lessons/rebuild-passages'
import { lessonsShowing } from './lessons-showing'
import { readTrack } from './read-track'
import { viewMedia } from './view-media'

/**
 * Keeps a film's captions or chapters in one language, in the place of those it had. What search finds of the lessons that show the
 * film is made anew with them.
 *
 * @throws {Refusal} media_not_found, media_no_film, captions_invalid with every mistake by its line
 */
export async function saveTrack(em: EntityManager, actor: Actor, id: string, input: TrackInput): Promise<MediaView> {
  return em.transactional(async (tx) => {
    // Locked, so that two people's captions come one after the other.
    const asset = await tx.findOne(MediaAsset, { id }, { lockMode: LockMode.PESSIMISTIC_WRITE })
    if (!asset) throw new Refusal('media_not_found')
    if (asset.kind !== 'video') throw new Refusal('media_no_film')
    const { cues, issues } = readTrack(input, asset.durationSeconds ?? null)
    if (issues.length > 0) throw new Refusal('captions_invalid', undefined, { issues })

    const { kind, language, vtt } = input
    const now = { vtt, cues, savedBy: tx.getReference(User, actor.id), savedAt: new Date() }
    const before = await tx.findOne(MediaTrack, { asset: id, kind, language })
    // Written with the query: changes inside JSON are not followed.
    if (before) await tx.nativeUpdate(MediaTrack, { id: before.id }, now)
    else tx.persist(tx.create(MediaTrack, { asset, kind, language, ...now }))
    recordEvent(tx, { actor: actor.id, action: 'track-saved', subject: `media:${id}`, detail: { kind, language, cues: cues.length } })
    await tx.flush()
    if (before) await tx.refresh(before)
    if (kind === 'captions') for (const lesson of await lessonsShowing(tx, id)) await rebuildPassages(tx, lesson)
    const [view] = await viewMedia(tx, actor.id, [asset])
    if (!view) throw new Error(`media ${id} has a track and is not there`)
    return view
  })
}
