import { LockMode } from '@mikro-orm/postgresql'
import { AdapterRefusal } from '#server/adapters/adapter-refusal'
import { MediaAsset } from '#server/db/entities/MediaAsset'
import type { App } from '#server/utils/app'
import { recordEvent } from '#server/utils/record-event'

/**
 * Reads a film that came in parts from end to end, without keeping it, and compares its SHA-256 with the announced one. As announced,
 * it may be shown; if not, it is refused with the reason and leaves storage. Twice is no harm: what is decided stays.
 */
export async function hashMedia(app: App, mediaId: string): Promise<void> {
  const em = app.orm.em.fork()
  const asset = await em.findOne(MediaAsset, { id: mediaId, state: 'being checked' }, { populate: ['upload'] })
  if (!asset?.upload) return
  const { sha256: announced } = asset.upload.$
  const found = await hashOf(app, asset.key)
  const asAnnounced = found === announced
  await em.transactional(async (tx) => {
    const row = await tx.findOneOrFail(MediaAsset, { id: mediaId }, { lockMode: LockMode.PESSIMISTIC_WRITE, refresh: true, populate: ['upload'] })
    if (row.state !== 'being checked') return
    row.state = asAnnounced ? 'ready' : 'refused'
    if (!asAnnounced) {
      row.problem = found === null ? 'Storage does not have this film. Send it again.' : 'What arrived is not the file that was announced: its SHA-256 differs. Send the film again.'
      // The job that clears uploads removes the file should this process end before the line below.
      if (row.upload) row.upload.$.state = 'refused'
    }
    recordEvent(tx, { actor: 'hash-media', action: asAnnounced ? 'media-ready' : 'media-refused', subject: `media:${mediaId}`, detail: { sha256: found } })
  })
  if (!asAnnounced) await app.storage.remove(asset.key)
}

/** Null when storage has no such file. */
async function hashOf(app: App, key: string): Promise<string | null> {
  try {
    return await app.storage.sha256Of(key)
  }
  catch (thrown) {
    if (thrown instanceof AdapterRefusal && thrown.code === 'upload_incomplete') return null
    throw thrown
  }
}
