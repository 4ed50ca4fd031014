import type { EntityManager } from '@mikro-orm/postgresql'
import { Photo } from '#server/db/entities/Photo'
import { afterEvidence } from '#server/services/submissions/after-evidence'
import { openForEvidence } from '#server/services/submissions/open-for-evidence'
import type { Actor } from '#server/utils/actor'
import type { App } from '#server/utils/app'
import { recordEvent } from '#server/utils/record-event'
import { findPhoto } from './find-photo'

/**
 * Takes a photo out of the evidence. The photo stays; it only no longer counts.
 *
 * @throws {Refusal} not_found, and whatever `openForEvidence` refuses
 */
export async function setPhotoAside(em: EntityManager, app: App, actor: Actor, id: string): Promise<{ id: string }> {
  return em.transactional(async (tx) => {
    const { photo } = await findPhoto(tx, app, actor, id)
    const submission = await openForEvidence(tx, app, actor, photo.submission.id)
    const row = await tx.findOneOrFail(Photo, { id })
    if (row.setAsideAt) return { id }
    row.setAsideAt = app.clock.schoolNow()
    recordEvent(tx, { actor: actor.id, action: 'photo-set-aside', subject: `submission:${submission.id}`, detail: { photo: id } })
    await tx.flush()
    await afterEvidence(tx, app, submission)
    return { id }
  })
}
