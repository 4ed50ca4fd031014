import type { EntityManager } from '@mikro-orm/postgresql'
import { EvidenceDocument } from '#server/db/entities/EvidenceDocument'
import { FlowSheetReading } from '#server/db/entities/FlowSheet'
import { Photo } from '#server/db/entities/Photo'
import { PracticeHead } from '#server/db/entities/PracticeHead'
import { Reading } from '#server/db/entities/Reading'
import { Submission } from '#server/db/entities/Submission'
import { viewDocument } from '#server/services/documents/view-document'
import { viewSheet } from '#server/services/flow-sheets/view-sheet'
import { headSummary } from '#server/services/heads/head-summary'
import { loadRoute } from '#server/services/heads/route-state'
import { visibleHeads } from '#server/services/heads/visible-heads'
import { maySeePhoto } from '#server/services/photos/photo-rights'
import { viewPhoto } from '#server/services/photos/view-photo'
import { viewReading } from '#server/services/readings/view-reading'
import { cautionLines } from '#server/services/school/stage-words'
import type { Actor } from '#server/utils/actor'
import type { App } from '#server/utils/app'
import type { SubmissionView } from '#shared/contract/views'
import { pointName } from '#shared/domain/rubric/route-state'
import { findSubmission, type FoundSubmission } from './find-submission'
import { gatherEvidence } from './gather-evidence'
import { submissionCriteria } from './submission-criteria'
import { wantedViews } from './wanted-views'

/**
 * A submission with its evidence, what is still wanted, and the results of its newest version. From the second try on the first
 * try's results come with it, so that the two can be held side by side. The office sees no photos and cannot open documents.
 *
 * @throws {Refusal} submission_not_found
 */
export async function viewSubmission(em: EntityManager, app: App, actor: Actor, id: string): Promise<SubmissionView> {
  const submission = await findSubmission(em, app, actor, id)
  const head = submission.head.$
  const { rubric } = head.rubric.$
  const teaches = await em.count(PracticeHead, { $and: [{ id: head.id }, await visibleHeads(em, app, actor, 'teach')] }) > 0
  const route = await loadRoute(em, app, head)
  const { evidence } = await gatherEvidence(em, submission)
  const photos = (await em.find(Photo, { submission: submission.id, setAsideAt: null }, { populate: ['addedBy'], orderBy: { takenAt: 'asc', id: 'asc' } }))
    .filter(photo => maySeePhoto(actor, { view: photo.view, studentId: head.student.id, taught: teaches }))
  const readings = await em.find(Reading, { submission: submission.id }, { populate: ['instrument', 'addedBy'], orderBy: { takenAt: 'asc', recordedAt: 'asc' } })
  const sheetReadings = await em.find(FlowSheetReading, { sheet: { submission: submission.id } }, { populate: ['sheet', 'sheet.upload'], orderBy: { sheet: { addedAt: 'asc' }, version: 'desc' } })
  const sheets = sheetReadings.filter((one, index) => sheetReadings.findIndex(other => other.sheet.id === one.sheet.id) === index)
  const documents = await em.find(EvidenceDocument, { submission: submission.id, setAsideAt: null }, { populate: ['upload'], orderBy: { addedAt: 'asc' } })
  const mayOpen = teaches || head.student.id === actor.id

  return {
    id: submission.id,
    head: headSummary(head, route),
    op: submission.op,
    stageName: rubric.stages.find(stage => stage.op === submission.op)?.name ?? '',
    rubricVersion: head.rubric.$.version,
    version: submission.version,
    part: submission.part,
    point: submission.point ? { code: submission.point, name: pointName(submission.point) } : null,
    try: submission.tryNumber,
    state: submission.state,
    decision: submission.decision ?? null,
    scoredVersion: submission.scoredVersion ?? null,
    score: submission.score ?? null,
    word: submission.word ?? null,
    note: submission.note,
    askedAt: submission.askedAt?.toISOString() ?? null,
    ports: submission.ports,
    acidCleaned: head.acidCleaned ?? null,
    photos: photos.map(viewPhoto),
    readings: readings.map(viewReading),
    sheets: sheets.map(viewSheet),
    documents: documents.map(one => ({ ...viewDocument(one), ...(mayOpen ? {} : { url: null }) })),
    wanted: wantedViews(rubric, evidence),
    criteria: await submissionCriteria(em, submission),
    caution: { lines: cautionLines(submission.op) },
    firstTry: await firstTry(em, submission),
  }
}

async function firstTry(em: EntityManager, submission: FoundSubmission): Promise<SubmissionView['firstTry']> {
  if (submission.tryNumber === 1) return null
  const first = await em.findOne(Submission, { head: submission.head.id, op: submission.op, part: submission.part, tryNumber: 1 }, { populate: ['head.rubric'] })
  return first ? { id: first.id, criteria: await submissionCriteria(em, first) } : null
}
