import { createHash, randomUUID } from 'node:crypto'
import { Clearance } from '#server/db/entities/Clearance'
import { HeadStop, WitnessCall } from '#server/db/entities/PointRelease'
import { Mail } from '#server/db/entities/Mail'
import { PracticeHead } from '#server/db/entities/PracticeHead'
import { Submission } from '#server/db/entities/Submission'
import { Photo } from '#server/db/entities/Photo'
import { Upload, type UploadPurpose } from '#server/db/entities/Upload'
import { User } from '#server/db/entities/User'
import { addDocument } from '#server/services/documents/add-document'
import { addNote } from '#server/services/lessons/add-note'
import { addFlowSheet } from '#server/services/flow-sheets/add-flow-sheet'
import type { Actor } from '#server/utils/actor'
import type { SubmissionPart } from '#shared/domain/rubric/evidence'
import type { Harness } from '../harness'
import { makeCurriculum, words } from '../lessons/curriculum'
import type { TestSchool } from '../review/school'
import { clearFor, walkTo } from '../walk'

/** What the rows of the matrix call upon. Whatever a row asks for is made fresh, so that no call is spoilt by one before it. */
export interface World {
  harness: Harness
  school: TestSchool
  bettany: Actor
  freya: Actor
  /** Somebody invited who never came. */
  stranger: Actor
  /** A head of this person walked up to op 70, Bowl. */
  head: (owner: Actor) => Promise<string>
  /** A draft of its first bowl. */
  draft: (owner: Actor) => Promise<string>
  /** The same scored, all accept. */
  scored: (owner: Actor) => Promise<string>
  /** A photo of a fresh draft; view-13 is the one the safety officer may see. */
  photo: (owner: Actor, view?: string) => Promise<string>
  /** A received upload of this person. */
  upload: (owner: Actor, purpose: UploadPurpose) => Promise<string>
  /** A flow sheet of a fresh draft, read. */
  sheet: (owner: Actor) => Promise<string>
  /** A document of a fresh draft. */
  document: (owner: Actor) => Promise<string>
  stop: (owner: Actor, by: Actor) => Promise<string>
  /** Slug of a published lesson. */
  lesson: () => Promise<string>
  /** A note of this person in a lesson. */
  note: (owner: Actor) => Promise<string>
  /** A clearance for the saw, which no stage of a student asks for. */
  clearance: (owner: Actor) => Promise<string>
  /** A message that was sent. */
  mail: () => Promise<string>
  /** Op 60 with Witness 1 told a moment ago. */
  told: (owner: Actor) => Promise<string>
}

/** @param school with Imre as the student everything belongs to unless a row says otherwise */
export async function makeWorld(harness: Harness, school: TestSchool): Promise<World> {
  const bettany = await school.person('Bettany Crake', ['student'])
  const freya = await school.person('Freya Dunmallet', ['student'])
  const stranger = await school.person('Tomek Oake', ['student'])
  const curriculum = await makeCurriculum(school)
  await curriculum.place(school.imre, 'here', 1)
  await curriculum.place(bettany, 'here', 2)
  await curriculum.place(freya, 'finished', null, { accessUntil: new Date(school.now().getTime() + 2 * 365 * 24 * 3_600_000) })
  for (const one of [school.imre, bettany, freya]) await clearFor(school, one)
  let count = 200

  async function head(owner: Actor, op = 70): Promise<string> {
    count += 1
    const id = await school.anotherHead(`DNK-0${count}`, owner)
    await walkTo(school, op, id)
    return id
  }
  async function draft(owner: Actor, op = 70, part: SubmissionPart = 'first', point = 'hold-4'): Promise<string> {
    const headId = await head(owner, op)
    return school.em().transactional(async (tx) => {
      const made = tx.create(Submission, {
        head: tx.getReference(PracticeHead, headId), op, part, point, tryNumber: 1, version: 1, ports: [{ cylinder: 1, side: 'intake' }], startedBy: tx.getReference(User, owner.id), createdAt: school.now(),
        askedAt: null, scoredVersion: null, scoredAt: null, decidedAt: null, decision: null, score: null, word: null,
      })
      tx.persist(made)
      return made.id
    })
  }
  async function upload(owner: Actor, purpose: UploadPurpose, state: 'received' | 'used' = 'received'): Promise<string> {
    const key = `uploads/${randomUUID()}`
    const body = Buffer.from(`words of ${key}`)
    const contentType = purpose === 'photo' ? 'image/jpeg' : 'text/plain'
    await harness.app.storage.put({ key, body, contentType })
    return school.em().transactional(async (tx) => {
      const made = tx.create(Upload, {
        owner: tx.getReference(User, owner.id), purpose, key, filename: 'a.txt', bytes: body.length, contentType, sha256: createHash('sha256').update(body).digest('hex'),
        multipartId: null, detectedType: contentType, state, createdAt: school.now(), receivedAt: school.now(), usedAt: state === 'used' ? school.now() : null, usedBy: null,
      })
      tx.persist(made)
      return made.id
    })
  }
  async function lesson(): Promise<string> {
    count += 1
    const slug = `lesson-${count}`
    // Downward: a lesson made by the route takes the number after the highest.
    await curriculum.lesson(10_000 - count, slug, 'Scribing', [words('Scribe one line.')])
    return slug
  }

  return {
    harness, school, bettany, freya, stranger, upload,
    lesson,
    async note(owner) {
      return (await addNote(school.em(), harness.app, owner, await lesson(), { anchor: null, text: 'Ask about this.' })).id
    },
    head: owner => head(owner),
    draft: owner => draft(owner),
    async scored(owner) {
      const headId = await head(owner)
      return (await school.scored({ op: 70, part: 'first', point: 'hold-4', head: headId })).id
    },
    async photo(owner, view = 'view-12') {
      const submissionId = await draft(owner)
      const uploadId = await upload(owner, 'photo', 'used')
      return school.em().transactional(async (tx) => {
        const key = `shown/${randomUUID()}`
        await harness.app.storage.put({ key, body: Buffer.from('a picture'), contentType: 'image/webp' })
        const made = tx.create(Photo, {
          submission: tx.getReference(Submission, submissionId), upload: tx.getReference(Upload, uploadId), view, cylinder: 1, side: 'intake', spot: null, card: null, seatDepth: null, clockMark: null, state: 'taken', problem: null,
          width: 40, height: 30, thumbKey: key, previewKey: key, addedBy: tx.getReference(User, owner.id), takenAt: school.now(), setAsideAt: null,
        })
        tx.persist(made)
        return made.id
      })
    },
    async sheet(owner) {
      const submissionId = await draft(owner)
      const { sheet } = await addFlowSheet(school.em(), harness.app, owner, submissionId, { uploadId: await upload(owner, 'flow-sheet') })
      return sheet.id
    },
    async document(owner) {
      const submissionId = await draft(owner)
      const uploadId = await upload(owner, 'document')
      return (await addDocument(school.em(), harness.app, owner, submissionId, { uploadId, note: 'damage list' })).id
    },
    async stop(owner, by) {
      const headId = await head(owner)
      return school.em().transactional(async (tx) => {
        const made = tx.create(HeadStop, { head: tx.getReference(PracticeHead, headId), by: tx.getReference(User, by.id), at: school.now(), criterion: null, where: 'bowl wall', reason: 'Look again.', liftedBy: null, liftedAt: null })
        tx.persist(made)
        return made.id
      })
    },
    async clearance(owner) {
      return school.em().transactional(async (tx) => {
        const made = tx.create(Clearance, { person: tx.getReference(User, owner.id), tool: 'saw', from: school.now(), until: new Date(school.now().getTime() + 3_600_000), givenBy: tx.getReference(User, school.ingrid.id), withdrawnAt: null })
        tx.persist(made)
        return made.id
      })
    },
    async mail() {
      return school.em().transactional(async (tx) => {
        const id = randomUUID()
        tx.persist(tx.create(Mail, { id, key: `test:${id}`, template: 'welcome', person: null, to: 'imre@sallowbeck.example', subject: 'Tuesday: what to bring', html: '<p>Cotton clothes.</p>', text: 'Cotton clothes.', attachments: null, state: 'sent', messageId: `${id}@test`, providerId: null, problem: null, createdAt: new Date(), sentAt: new Date() }))
        return id
      })
    },
    async told(owner) {
      const headId = await head(owner, 60)
      await school.em().transactional(async (tx) => {
        tx.persist(tx.create(WitnessCall, { head: tx.getReference(PracticeHead, headId), point: 'witness-1', toldBy: tx.getReference(User, owner.id), toldAt: school.now(), waitUntil: new Date(school.now().getTime() + 1_800_000), seenBy: null, seenAt: null }))
      })
      return headId
    },
  }
}
