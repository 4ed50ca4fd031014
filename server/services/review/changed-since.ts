import type { EntityManager } from '@mikro-orm/postgresql'
import { EvidenceDocument } from '#server/db/entities/EvidenceDocument'
import { Photo } from '#server/db/entities/Photo'
import { Reading } from '#server/db/entities/Reading'
import { ScoreSet } from '#server/db/entities/ScoreSet'
import type { Submission } from '#server/db/entities/Submission'
import { newestReadings } from '#server/services/submissions/gather-evidence'
import { quantityInWords, viewNames } from '#shared/domain/rubric/words'
import { resultSpot } from './result-spot'

/** What came into a submission since the version somebody looked at, in words; what that version rested on is kept with its results. */
export async function changedSince(em: EntityManager, submission: Submission, seenVersion: number): Promise<string[]> {
  const seen = await em.findOne(ScoreSet, { submission: submission.id, version: seenVersion }, { populate: ['restsOn'] })
  const known = new Set(seen ? [...seen.restsOn.readings, ...seen.restsOn.photos, ...seen.restsOn.documents, ...seen.restsOn.sheets] : [])
  const isNew = (row: { id: string }): boolean => !known.has(row.id)
  const [readings, photos, sheets, documents] = [
    await em.find(Reading, { submission: submission.id }, { orderBy: { recordedAt: 'asc' } }),
    await em.find(Photo, { submission: submission.id }, { orderBy: { takenAt: 'asc' } }),
    // Results rest on a reading of a sheet; read anew, the sheet is new.
    (await newestReadings(em, submission.head.id)).filter(one => one.sheet.$.submission.id === submission.id),
    await em.find(EvidenceDocument, { submission: submission.id }, { orderBy: { addedAt: 'asc' } }),
  ]
  const changes = [
    ...readings.filter(reading => isNew(reading) && !reading.voidedAt).map(reading => `a reading of ${quantityInWords(reading.quantity)}, ${resultSpot({ cylinder: reading.cylinder, side: reading.side, at: reading.at?.spot ?? null })}`),
    ...photos.filter(photo => isNew(photo) && !photo.setAsideAt && photo.state !== 'cannot-use').map(photo => `the photo ${viewNames[photo.view] ?? photo.view}`),
    ...sheets.filter(sheet => isNew(sheet)).map(() => 'a flow sheet'),
    ...documents.filter(document => isNew(document) && !document.setAsideAt).map(() => 'a document'),
  ]
  return changes.length > 0 ? changes : ['something it rests on']
}
