import { createHash, randomBytes } from 'node:crypto'
import type { EntityManager } from '@mikro-orm/postgresql'
import { EvidenceDocument } from '#server/db/entities/EvidenceDocument'
import { Instrument } from '#server/db/entities/Instrument'
import { Photo } from '#server/db/entities/Photo'
import { Reading } from '#server/db/entities/Reading'
import { ScaleCard } from '#server/db/entities/ScaleCard'
import { Upload } from '#server/db/entities/Upload'
import { afterEvidence } from '#server/services/submissions/after-evidence'
import { openForEvidence } from '#server/services/submissions/open-for-evidence'
import type { Actor } from '#server/utils/actor'
import type { App } from '#server/utils/app'
import { recordEvent } from '#server/utils/record-event'
import { doubtOfReading } from '#server/services/readings/doubt-of-reading'
import { checkPortOfReading } from '#server/services/readings/port-of-reading'
import { quantityOfReading } from '#server/services/readings/quantity-of-reading'
import { refuseImplausible } from '#server/services/readings/refuse-implausible'
import type { FoundSubmission } from '#server/services/submissions/find-submission'
import { typedValues } from '#shared/contract/typed-values'
import { stageAsDue } from '#shared/domain/rubric/stage-as-due'
import type { StoryPicture } from './pictures'
import type { PhotoToTake } from './wanted-proof'
import type { SpotToRead } from './iron'

export interface ProofToHandIn {
  readings: (Omit<SpotToRead, 'instrument'> & { values: string[], instrument: string })[]
  photos: (PhotoToTake & StoryPicture & { card: string | null })[]
  documents: { note: string, text: string }[]
}

/**
 * Hands in a whole part's proof at once: what a student does one by one, under the same checks of the submission, in one transaction.
 * Readings go through the same parsing as the reading pad's; what people see of a picture is made once for all photos of one drawing.
 */
export async function handIn(em: EntityManager, app: App, actor: Actor, submissionId: string, proof: ProofToHandIn): Promise<void> {
  const at = app.clock.schoolNow()
  const files = [
    ...proof.photos.map(photo => ({ purpose: 'photo' as const, filename: photo.filename, contentType: 'image/jpeg', body: photo.jpeg })),
    ...proof.documents.map(({ note, text }) => ({ purpose: 'document' as const, filename: `${note.replace(/[^a-z0-9]+/gi, '-').toLowerCase().slice(0, 60)}.txt`, contentType: 'text/plain', body: Buffer.from(text, 'utf8') })),
  ].map(file => ({ ...file, id: crypto.randomUUID(), useId: crypto.randomUUID(), key: `${file.purpose}/${randomBytes(24).toString('base64url')}` }))
  await storeAll(app, files)

  await em.transactional(async (tx) => {
    const submission = await openForEvidence(tx, app, actor, submissionId)
    const instruments = new Map((await tx.find(Instrument, {})).map(one => [one.code, one]))
    const cards = new Map((await tx.find(ScaleCard, {})).map(one => [one.number, one.id]))
    const readings = proof.readings.map(reading => readingRow(reading, instruments, submission, { addedBy: actor.id, at }))
    if (readings.length > 0) await tx.insertMany(Reading, readings)
    if (files.length > 0) {
      await tx.insertMany(Upload, files.map(({ id, useId, key, purpose, filename, contentType, body }) => ({
        id, owner: actor.id, purpose, key, filename, bytes: body.length, contentType, sha256: createHash('sha256').update(body).digest('hex'), multipartId: null, detectedType: contentType,
        state: 'used' as const, createdAt: at, receivedAt: at, usedAt: at, usedBy: `${purpose}:${useId}`,
      })))
    }
    const [photoFiles, documentFiles] = [files.slice(0, proof.photos.length), files.slice(proof.photos.length)]
    if (photoFiles.length > 0) {
      await tx.insertMany(Photo, photoFiles.map(({ id, useId }, index) => {
        const { view, cylinder, side, spot, preview, card, shownKeys } = proof.photos[index] as ProofToHandIn['photos'][number]
        return {
          id: useId, submission: submission.id, upload: id, view, cylinder, side, spot, card: (card === null ? null : cards.get(card)) ?? null, seatDepth: null, clockMark: null, state: 'taken' as const, problem: null,
          width: preview.widthPx, height: preview.heightPx, thumbKey: shownKeys.thumbnail, previewKey: shownKeys.preview, addedBy: actor.id, takenAt: at, setAsideAt: null,
        }
      }))
    }
    if (documentFiles.length > 0) {
      await tx.insertMany(EvidenceDocument, documentFiles.map(({ id, useId }, index) => ({
        id: useId, submission: submission.id, upload: id, note: proof.documents[index]?.note ?? '', addedBy: actor.id, addedAt: at, setAsideAt: null,
      })))
    }
    recordEvent(tx, { actor: actor.id, action: 'evidence-added', subject: `submission:${submission.id}`, detail: { readings: readings.length, photos: photoFiles.length, documents: documentFiles.length } })
    await afterEvidence(tx, app, submission)
  })
}

/** What is read before a cut is read this long before the rest, ms. */
const beforeTheCut = 40 * 60_000

/** A reading as `recordReading` would keep it, refused by the same checks. */
function readingRow(reading: ProofToHandIn['readings'][number], instruments: ReadonlyMap<string, Instrument>, submission: FoundSubmission, { addedBy, at }: { addedBy: string, at: Date }) {
  const { card } = submission.head.$.casting.$
  const stage = stageAsDue(submission.head.$.rubric.$.rubric, submission.op)
  const quantity = quantityOfReading(stage, { quantity: reading.quantity })
  checkPortOfReading(stage, card, quantity, reading)
  const instrument = instruments.get(reading.instrument)
  if (!instrument || !instrument.quantities.includes(reading.quantity)) throw new Error(`the story reads ${reading.quantity} with ${reading.instrument}, which does not fit`)
  const unit = quantity.is.baseUnit
  const typed = typedValues(quantity.is, unit, reading.values)
  if (!typed.ok) throw new Error(`the story types ${reading.values.join(', ')} as ${reading.quantity}: ${typed.issues.map(issue => issue.message).join(' ')}`)
  refuseImplausible(quantity, typed.values, reading.values, unit, { card, side: reading.side })
  return {
    id: crypto.randomUUID(), submission: submission.id, quantity: reading.quantity, cylinder: reading.cylinder, side: reading.side, at: reading.spot === null ? null : { spot: reading.spot }, when: reading.when,
    asTyped: reading.values, unit, values: typed.values, baseUnit: unit, instrument: instrument.id, expandedU: doubtOfReading(instrument, typed.values, unit), addedBy, takenAt: reading.when === 'before' ? new Date(at.getTime() - beforeTheCut) : at, recordedAt: at, voids: null, voidedAt: null,
  }
}

/** Eight at a time: storage answers each on its own. */
async function storeAll(app: App, files: readonly { key: string, body: Buffer, contentType: string }[]): Promise<void> {
  const workers = Array.from({ length: 8 }, async (_, first) => {
    for (let index = first; index < files.length; index += 8) {
      const { key, body, contentType } = files[index] ?? { key: '', body: Buffer.alloc(0), contentType: '' }
      await app.storage.put({ key, body, contentType })
    }
  })
  await Promise.all(workers)
}
