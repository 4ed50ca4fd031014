import type { EntityManager } from '@mikro-orm/postgresql'
import { Photo } from '#server/db/entities/Photo'
import { PhotoPin, type Review } from '#server/db/entities/Review'
import { Refusal } from '#server/utils/refusal'
import type { ReviewInput } from '#shared/contract/inputs'
import type { Criterion } from '#shared/domain/rubric/criterion'

/**
 * Puts numbered pins on photos of the submissions under review.
 *
 * @throws {Refusal} pin_outside for another photo, one that was set aside, or a criterion the review is not about
 */
export async function placePins(tx: EntityManager, review: Review, submissionIds: readonly string[], criteria: readonly Criterion[], pins: ReviewInput['pins']): Promise<void> {
  const photos = await tx.find(Photo, { id: { $in: pins.map(pin => pin.photoId) }, submission: { $in: [...submissionIds] }, setAsideAt: null })
  pins.forEach((pin, index) => {
    const photo = photos.find(one => one.id === pin.photoId)
    if (!photo) throw new Refusal('pin_outside', undefined, { issues: [{ path: `pins.${index}.photoId`, message: 'is not a photo of this submission' }] })
    if (!criteria.some(criterion => criterion.id === pin.criterion)) throw new Refusal('pin_outside', undefined, { issues: [{ path: `pins.${index}.criterion`, message: 'is not one of this review' }] })
    tx.persist(tx.create(PhotoPin, { review, photo, number: index + 1, x: pin.x, y: pin.y, criterion: pin.criterion, text: pin.text }))
  })
}
