import type { EntityManager } from '@mikro-orm/postgresql'
import { EvidenceDocument } from '#server/db/entities/EvidenceDocument'
import { FlowSheetReading } from '#server/db/entities/FlowSheet'
import { Photo } from '#server/db/entities/Photo'
import { Reading } from '#server/db/entities/Reading'
import { viewDocument } from '#server/services/documents/view-document'
import { viewSheet } from '#server/services/flow-sheets/view-sheet'
import { maySeePhoto } from '#server/services/photos/photo-rights'
import { viewPhoto } from '#server/services/photos/view-photo'
import { viewReading } from '#server/services/readings/view-reading'
import type { Actor } from '#server/utils/actor'
import type { SubmissionView } from '#shared/contract/views'

export type EvidenceViews = Pick<SubmissionView, 'photos' | 'readings' | 'sheets' | 'documents'>

/**
 * The evidence of some submissions of one student, one submission after the other as given, each flow sheet by its newest reading.
 * What the person may not see of it is left out: photos by their view, and where a document is for all but the student and teachers.
 */
export async function evidenceViews(em: EntityManager, actor: Actor, { studentId, taught }: { studentId: string, taught: boolean }, submissionIds: readonly string[]): Promise<EvidenceViews> {
  const submission = { $in: [...submissionIds] }
  const photos = await em.find(Photo, { submission, setAsideAt: null }, { populate: ['addedBy'], orderBy: { takenAt: 'asc', id: 'asc' } })
  const readings = await em.find(Reading, { submission }, { populate: ['instrument', 'addedBy'], orderBy: { takenAt: 'asc', recordedAt: 'asc' } })
  const sheetReadings = await em.find(FlowSheetReading, { sheet: { submission } }, { populate: ['sheet', 'sheet.upload'], orderBy: { sheet: { addedAt: 'asc' }, version: 'desc' } })
  const documents = await em.find(EvidenceDocument, { submission, setAsideAt: null }, { populate: ['upload'], orderBy: { addedAt: 'asc' } })
  const sheets = sheetReadings.filter((one, index) => sheetReadings.findIndex(other => other.sheet.id === one.sheet.id) === index)
  const mayOpen = taught || studentId === actor.id

  const inOrder = <Row>(rows: Row[], of: (row: Row) => string) => submissionIds.flatMap(id => rows.filter(row => of(row) === id))
  return {
    photos: inOrder(photos, one => one.submission.id).filter(photo => maySeePhoto(actor, { view: photo.view, studentId, taught })).map(viewPhoto),
    readings: inOrder(readings, one => one.submission.id).map(viewReading),
    sheets: inOrder(sheets, one => one.sheet.$.submission.id).map(viewSheet),
    documents: inOrder(documents, one => one.submission.id).map(one => ({ ...viewDocument(one), ...(mayOpen ? {} : { url: null }) })),
  }
}
