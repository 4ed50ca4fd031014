import type { EntityManager } from '@mikro-orm/postgresql'
import { Clearance } from '#server/db/entities/Clearance'
import { Consent, ConsentText } from '#server/db/entities/Consent'
import { HeadStop, PointRelease, WitnessCall } from '#server/db/entities/PointRelease'
import { PracticeHead } from '#server/db/entities/PracticeHead'
import { Instrument } from '#server/db/entities/Instrument'
import { Reading } from '#server/db/entities/Reading'
import { Review } from '#server/db/entities/Review'
import { Submission } from '#server/db/entities/Submission'
import { User } from '#server/db/entities/User'
import { afterEvidence } from '#server/services/submissions/after-evidence'
import { openForEvidence } from '#server/services/submissions/open-for-evidence'
import type { Actor } from '#server/utils/actor'
import { partsOfStage, portsOfPart } from '#shared/domain/rubric/covers'
import { pointOfPart } from '#shared/domain/rubric/route-state'
import type { Harness } from './harness'
import type { TestSchool } from './review/school'

const day = 24 * 3_600_000

/** Clears somebody for every tool of the school, from a month ago until `days` from now, with the safety form signed. */
export async function clearFor(school: TestSchool, who: Actor, { days = 60, tools = ['hot-tank', 'pressure-rig', 'flow-bench', 'die-grinder', 'right-angle-grinder'] } = {}): Promise<void> {
  await sign(school, who)
  await school.em().transactional(async (tx) => {
    for (const tool of tools) {
      tx.persist(tx.create(Clearance, { person: tx.getReference(User, who.id), tool, from: new Date(school.now().getTime() - 30 * day), until: new Date(school.now().getTime() + days * day), givenBy: tx.getReference(User, school.ingrid.id), withdrawnAt: null }))
    }
  })
}

/** Signs the newest safety form for somebody, if it is not signed. */
export async function sign(school: Pick<TestSchool, 'em' | 'now'>, who: Pick<Actor, 'id' | 'name'>): Promise<void> {
  await school.em().transactional(async (tx) => {
    const [text] = await tx.find(ConsentText, {}, { orderBy: { version: 'desc' }, limit: 1 })
    if (!text || await tx.count(Consent, { person: who.id, text }) > 0) return
    tx.persist(tx.create(Consent, { person: tx.getReference(User, who.id), text, ticks: text.clauses.map(one => one.code), signedAs: who.name, guardian: null, at: new Date(school.now().getTime() - 30 * day) }))
  })
}

/** Walks a head up to a stage: every part of every earlier stage decided (what was begun of one already, too), its holds released, its witness points told and waited for. */
export async function walkTo(school: TestSchool, op: number, headId = school.headId, from = 0): Promise<void> {
  await school.em().transactional(async (tx) => {
    const head = await tx.findOneOrFail(PracticeHead, headId, { populate: ['rubric', 'casting'] })
    const at = new Date(school.now().getTime() - 2 * day)
    for (const stage of head.rubric.$.rubric.stages.filter(one => one.op >= from && one.op < op)) {
      for (const part of partsOfStage(stage)) {
        const point = pointOfPart(stage, part)
        const there = await tx.findOne(Submission, { head: headId, op: stage.op, part, state: { $ne: 'decided' } })
        const submission = there ?? tx.create(Submission, {
          head, op: stage.op, part, point: point?.code ?? null, tryNumber: 1, version: 1, ports: portsOfPart(stage, part, head.casting.$.card, 1), startedBy: head.student, createdAt: at, askedAt: at,
          scoredVersion: 1, scoredAt: at, decidedAt: at, decision: 'release', state: 'decided', score: 100, word: 'Sound',
        })
        tx.persist(Object.assign(submission, { state: 'decided', decision: 'release', decidedAt: at }))
        if (point?.kind === 'witness') tx.persist(tx.create(WitnessCall, { head, point: point.code, toldBy: head.student, toldAt: at, waitUntil: new Date(at.getTime() + 1_800_000), seenBy: null, seenAt: null }))
        if (point?.kind === 'hold') for (const by of [school.hanne, school.marit].slice(0, point.signersNeeded ?? 1)) await release(tx, submission, by, at)
      }
    }
  })
}

/** A release of a submission's point, decided by hand. */
export async function release(tx: EntityManager, submission: Submission, by: Actor, at: Date, { conditions = [] as PointRelease['conditions'], condition = null as string | null } = {}): Promise<void> {
  const person = tx.getReference(User, by.id)
  const review = tx.create(Review, { submission, seenVersion: submission.version, by: person, at, decision: 'release', point: submission.point, condition, sentences: [], reasons: [], readAt: null })
  tx.persist(review)
  tx.persist(tx.create(PointRelease, { head: submission.head, point: submission.point ?? '', review, by: person, at, restsOn: {}, conditions, condition, shutAgainAt: null }))
  Object.assign(submission, { state: 'decided', decision: 'release', decidedAt: at })
}

/** A decision other than a release, by hand. */
export async function decide(school: TestSchool, submissionId: string, decision: 'send-back' | 'stop', by = school.hanne): Promise<void> {
  await school.em().transactional(async (tx) => {
    const submission = await tx.findOneOrFail(Submission, submissionId)
    tx.persist(tx.create(Review, { submission, seenVersion: submission.version, by: tx.getReference(User, by.id), at: school.now(), decision, point: submission.point ?? null, condition: null, feedback: 'Take it again at 12.', sentences: [], reasons: [], readAt: null }))
    Object.assign(submission, { state: 'decided', decision, decidedAt: school.now() })
    if (decision === 'stop') tx.persist(tx.create(HeadStop, { head: submission.head, by: tx.getReference(User, by.id), at: school.now(), criterion: null, where: 'bowl wall, cylinder 1 intake', reason: 'Pressure test first.', liftedBy: null, liftedAt: null }))
  })
}

/** A reading put in the way every piece of evidence goes in: the submission locked and looked at, then told. */
export async function read(harness: Pick<Harness, 'app'>, school: TestSchool, submissionId: string, given: { quantity: string, values: number[], cylinder?: number, side?: 'intake' | 'exhaust', spot?: string, unit?: string, u?: number, when?: 'before' | 'after', by?: Actor }): Promise<string> {
  const { app } = harness
  return school.em().transactional(async (tx) => {
    const by = given.by ?? school.imre
    const submission = await openForEvidence(tx, app, by, submissionId)
    const code = `gauge-${given.quantity}`
    const instrument = await tx.findOne(Instrument, { code }) ?? tx.create(Instrument, { code, name: code, quantities: [given.quantity], expandedU: given.u ?? 0.08, unit: given.unit ?? 'mm', dueOn: null, createdAt: school.now() })
    tx.persist(instrument)
    const reading = tx.create(Reading, {
      submission, quantity: given.quantity, cylinder: given.cylinder ?? null, side: given.side ?? null, at: given.spot === undefined ? null : { spot: given.spot }, when: given.when ?? null,
      asTyped: given.values.map(String), unit: given.unit ?? 'mm', values: given.values, baseUnit: given.unit ?? 'mm', instrument, expandedU: given.u ?? 0.08, addedBy: tx.getReference(User, by.id),
      takenAt: school.now(), recordedAt: school.now(), voids: null, voidedAt: null,
    })
    tx.persist(reading)
    await tx.flush()
    await afterEvidence(tx, app, submission)
    return reading.id
  })
}
