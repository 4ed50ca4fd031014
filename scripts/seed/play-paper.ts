import type { EntityManager } from '@mikro-orm/postgresql'
import { PointRelease, WitnessCall } from '#server/db/entities/PointRelease'
import { PracticeHead } from '#server/db/entities/PracticeHead'
import { Review } from '#server/db/entities/Review'
import { Submission } from '#server/db/entities/Submission'
import { User } from '#server/db/entities/User'
import { partsOfStage, portsOfPart } from '#shared/domain/rubric/covers'
import type { RubricPoint } from '#shared/domain/rubric/criterion'
import { pointOfPart } from '#shared/domain/rubric/route-state'
import { handInSheet, practiceSheet } from './hand-in-sheet'
import { paperNote, type PaperHead } from './paper-heads'
import type { Player } from './play'
import { schoolInstant } from './school-instant'

/** Ops past the last hold: done on paper too, but with no record of theirs to carry over. */
const lastOp = 190

/**
 * Writes the routes of heads that were worked on paper: every part decided, every point released by whoever holds its post, spread
 * evenly over the course; no results, because nothing was scored. A kept flow sheet is read like any other.
 */
export async function playPaper(player: Player, heads: readonly PaperHead[], until: Date): Promise<void> {
  for (const head of heads) await playHead(player, head, until)
}

async function playHead({ story, actors }: Player, given: PaperHead, until: Date): Promise<void> {
  const { app } = story
  const em = app.orm.em.fork()
  const head = await em.findOne(PracticeHead, { number: given.number }, { populate: ['rubric', 'casting'] })
  if (!head) return
  const student = actors.get(given.student)
  if (!student) throw new Error(`nobody is called ${given.student}`)
  const stages = head.rubric.$.rubric.stages.filter(stage => stage.op <= lastOp)
  const [from, end] = [schoolInstant(given.from).getTime(), schoolInstant(given.until).getTime()]
  for (const [index, stage] of stages.entries()) {
    const sheets = given.sheets.filter(one => one.op === stage.op)
    const at = sheets[0] ? schoolInstant(sheets[0].at) : evenly(from, end, index, stages.length, given.sheets)
    if (at > until) return
    story.standAt(at)
    for (const part of partsOfStage(stage)) {
      const point = pointOfPart(stage, part)
      const submissionId = await em.transactional(async (tx) => {
        const submission = tx.create(Submission, {
          head, op: stage.op, part, point: point?.code ?? null, tryNumber: 1, version: 1, ports: portsOfPart(stage, part, head.casting.$.card, head.firstCylinder), note: paperNote,
          startedBy: tx.getReference(User, student.id), createdAt: at, askedAt: null, scoredVersion: null, scoredAt: null, decidedAt: null, decision: null, score: null, word: null,
        })
        tx.persist(submission)
        return submission.id
      })
      if (part === 'rest') for (const { file } of sheets) await handInSheet(app.orm.em.fork(), app, student, submissionId, { filename: file, body: practiceSheet(file) })
      await em.transactional(tx => decide(tx, submissionId, point, new Date(at.getTime() + 3_600_000), actors))
    }
  }
  await app.orm.em.fork().nativeUpdate(PracticeHead, { id: head.id }, { state: 'finished' })
}

/** Between the stages that have a date of their own, in their order. */
function evenly(from: number, end: number, index: number, count: number, sheets: PaperHead['sheets']): Date {
  const usual = from + (end - from) * (index + 1) / count
  const [first] = sheets
  // What comes before a dated sheet came before it.
  return first && first.op === 30 && index < 2 ? new Date(from + index * 3_600_000) : new Date(usual)
}

async function decide(tx: EntityManager, submissionId: string, point: RubricPoint | null, at: Date, actors: Player['actors']): Promise<void> {
  const submission = await tx.findOneOrFail(Submission, submissionId, { populate: ['head'] })
  Object.assign(submission, { state: 'decided', decision: 'release', askedAt: at, decidedAt: at })
  if (!point) return
  const first = { lead: 'Hanne', chamber: 'Silas', air: 'Marit', second: 'Marit', safety: 'Ingrid' } as Readonly<Record<string, string>>
  const names = point.signersNeeded === 2 ? ['Hanne', 'Marit'] : [first[point.signers[0] ?? 'lead'] ?? 'Hanne']
  const people = names.map(name => tx.getReference(User, actors.get(name)?.id ?? ''))
  if (point.kind === 'witness') tx.persist(tx.create(WitnessCall, { head: submission.head, point: point.code, toldBy: submission.startedBy, toldAt: at, waitUntil: at, seenBy: people[0] ?? null, seenAt: at }))
  for (const by of people) {
    const review = tx.create(Review, { submission, seenVersion: 1, by, at, decision: 'release', point: point.code, condition: null, feedback: '', sentences: [], reasons: [], readAt: at })
    tx.persist(review)
    if (point.kind === 'hold') tx.persist(tx.create(PointRelease, { head: submission.head, point: point.code, review, by, at, restsOn: { paper: true }, conditions: [], condition: null, shutAgainAt: null }))
  }
}
