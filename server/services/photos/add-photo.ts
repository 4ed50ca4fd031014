import type { EntityManager } from '@mikro-orm/postgresql'
import { Photo } from '#server/db/entities/Photo'
import { ScaleCard } from '#server/db/entities/ScaleCard'
import type { Upload } from '#server/db/entities/Upload'
import { User } from '#server/db/entities/User'
import { whenTaken } from '#server/services/school/when-taken'
import { afterEvidence } from '#server/services/submissions/after-evidence'
import type { FoundSubmission } from '#server/services/submissions/find-submission'
import { openForEvidence } from '#server/services/submissions/open-for-evidence'
import { takeUpload } from '#server/services/uploads/take-upload'
import type { Actor } from '#server/utils/actor'
import type { App } from '#server/utils/app'
import { enqueue } from '#server/utils/enqueue'
import { recordEvent } from '#server/utils/record-event'
import { Refusal } from '#server/utils/refusal'
import type { PhotoInput } from '#shared/contract/inputs'
import type { PhotoView } from '#shared/contract/views'
import { viewNames } from '#shared/domain/rubric/words'
import { viewPhoto } from './view-photo'

/**
 * Files a photo as evidence. Its header is read before anything is decoded; the pictures people see are made by a job.
 *
 * @throws {Refusal} whatever `openForEvidence` and `takeUpload` refuse, view_unknown, port_not_on_head, card_not_found,
 *   photo_seen_before, taken_in_future, picture_unreadable, picture_too_large, upload_wrong_type
 */
export async function addPhoto(em: EntityManager, app: App, actor: Actor, submissionId: string, input: PhotoInput): Promise<PhotoView> {
  return em.transactional(async (tx) => {
    const submission = await openForEvidence(tx, app, actor, submissionId)
    if (!(input.view in viewNames)) throw new Refusal('view_unknown')
    if (input.cylinder !== null && input.cylinder > submission.head.$.casting.$.card.cylinders) throw new Refusal('port_not_on_head', `This head has no cylinder ${input.cylinder}.`)
    const card = input.cardId ? await tx.findOne(ScaleCard, { id: input.cardId }) : null
    if (input.cardId && !card) throw new Refusal('card_not_found')

    const id = crypto.randomUUID()
    const upload = await takeUpload(tx, actor, input.uploadId, 'photo', `photo:${id}`)
    await refuseSeenBefore(tx, submission, upload)
    const facts = await app.imaging.inspect(await app.storage.read(upload.key))

    const photo = tx.create(Photo, {
      id, submission, upload, view: input.view, cylinder: input.cylinder, side: input.side, spot: input.spot ?? null, card,
      seatDepth: input.seatDepth ?? null, clockMark: input.clockMark ?? null, width: facts.widthPx, height: facts.heightPx,
      addedBy: tx.getReference(User, actor.id), takenAt: whenTaken(app, input.takenAt),
    })
    tx.persist(photo)
    recordEvent(tx, { actor: actor.id, action: 'photo-added', subject: `submission:${submission.id}`, detail: { photo: id, view: input.view, cylinder: input.cylinder, side: input.side, sha256: upload.sha256 } })
    await tx.flush()
    await enqueue(app, tx, 'prepare-photo', { photoId: id })
    await afterEvidence(tx, app, submission)
    return viewPhoto(await tx.findOneOrFail(Photo, { id }, { populate: ['addedBy'] }))
  })
}

/** The same bytes among this head's and this cohort's evidence. The answer never tells whose they were. */
async function refuseSeenBefore(tx: EntityManager, submission: FoundSubmission, upload: Upload): Promise<void> {
  const head = submission.head.$
  const among = head.cohort ? { $or: [{ id: head.id }, { cohort: head.cohort.id }] } : { id: head.id }
  const seen = await tx.count(Photo, { upload: { sha256: upload.sha256, id: { $ne: upload.id } }, submission: { head: among } })
  if (seen > 0) throw new Refusal('photo_seen_before')
}
