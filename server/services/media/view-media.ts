import type { EntityManager } from '@mikro-orm/postgresql'
import type { MediaAsset } from '#server/db/entities/MediaAsset'
import { MediaTrack } from '#server/db/entities/MediaTrack'
import { User } from '#server/db/entities/User'
import { WatchPosition } from '#server/db/entities/WatchPosition'
import type { MediaView } from '#shared/contract/media'

/** Pictures and films as pages draw them, in the order given, with where this reader stopped in each. */
export async function viewMedia(em: EntityManager, personId: string, assets: readonly MediaAsset[]): Promise<MediaView[]> {
  if (assets.length === 0) return []
  const ids = assets.map(asset => asset.id)
  // Captions before chapters, a film's first language before its others.
  const tracks = await em.find(MediaTrack, { asset: { $in: ids } }, { orderBy: { kind: 'asc', language: 'asc' } })
  const positions = await em.find(WatchPosition, { asset: { $in: ids }, person: personId })
  const people = await em.find(User, { id: { $in: assets.flatMap(asset => asset.addedBy?.id ?? []) } })
  return assets.map((asset) => {
    const position = positions.find(one => one.asset.id === asset.id)
    const { id, kind, title, state, contentType, bytes } = asset
    return {
      id, kind, title, state, contentType, bytes,
      problem: asset.problem ?? null, width: asset.width ?? null, height: asset.height ?? null, durationSeconds: asset.durationSeconds ?? null,
      fileUrl: `/api/media/${id}/file`,
      tracks: tracks.filter(one => one.asset.id === id).map(one => ({ kind: one.kind, language: one.language, url: `/api/media/${id}/tracks/${one.kind}.vtt?language=${one.language}`, cues: one.cues })),
      addedBy: people.find(one => one.id === asset.addedBy?.id)?.name ?? null,
      addedAt: asset.addedAt.toISOString(),
      position: position ? { seconds: position.seconds, finished: (position.finishedAt ?? null) !== null } : null,
    }
  })
}
