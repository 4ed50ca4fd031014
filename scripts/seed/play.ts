import type { EntityManager } from '@mikro-orm/postgresql'
import { Photo } from '#server/db/entities/Photo'
import { PracticeHead } from '#server/db/entities/PracticeHead'
import { Submission } from '#server/db/entities/Submission'
import { User } from '#server/db/entities/User'
import { findHead } from '#server/services/heads/find-head'
import { decideReview } from '#server/services/review/decide-review'
import { loadPointCase, verdictFor } from '#server/services/review/point-case'
import { stopHead } from '#server/services/review/stop-head'
import { askForRelease } from '#server/services/submissions/ask-for-release'
import { findSubmission, type FoundSubmission } from '#server/services/submissions/find-submission'
import { gatherForPart } from '#server/services/submissions/gather-evidence'
import { scoreSubmission } from '#server/services/submissions/score-submission'
import { startDraft } from '#server/services/submissions/start-draft'
import type { Actor } from '#server/utils/actor'
import type { App } from '#server/utils/app'
import { Refusal } from '#server/utils/refusal'
import type { ReviewInput } from '#shared/contract/inputs'
import { instructorGives } from '#shared/domain/rubric/instructor-gives'
import { stageAsDue } from '#shared/domain/rubric/stage-as-due'
import { handIn, type ProofToHandIn } from './hand-in'
import { handInSheet, sheetFile } from './hand-in-sheet'
import { readIron, type StoryCard } from './iron'
import type { storyPictures } from './pictures'
import { schoolInstant } from './school-instant'
import type { StoryApp } from './story-app'
import type { SheetEvening, StoryHead, StoryPart, StoryReview } from './story-parts'
import { wantedProof, type PhotoToTake } from './wanted-proof'

const generatedNote = 'Generated for the demo school: readings and papers; pictures are rendered or drawn.'

interface Step { at: Date, what: string, run: () => Promise<void> }

export interface Player {
  story: StoryApp
  pictures: ReturnType<typeof storyPictures>
  actors: ReadonlyMap<string, Actor>
}

/** People of the school as they act in its services, by full name and by first name. */
export async function loadActors(em: EntityManager): Promise<Map<string, Actor>> {
  const actors = new Map<string, Actor>()
  for (const { id, name, email, roles, unit } of await em.find(User, {})) {
    const actor: Actor = { id, name, email, roles, unit, sessionId: '00000000-0000-4000-8000-000000000000' }
    actors.set(name, actor)
    actors.set(name.split(' ')[0] ?? name, actor)
  }
  return actors
}

/**
 * Plays the story up to an instant, step by step in the order things happened, through the same services the pages call.
 *
 * @returns how many steps were played
 * @throws when a step is refused: the story then tells of something the school does not allow
 */
export async function play(player: Player, heads: readonly StoryHead[], until: Date): Promise<number> {
  const steps = heads.flatMap(head => stepsOf(player, head)).filter(step => step.at <= until)
  steps.sort((a, b) => a.at.getTime() - b.at.getTime())
  for (const step of steps) {
    player.story.standAt(step.at)
    try {
      await step.run()
    }
    catch (thrown) {
      const more = thrown instanceof Refusal ? ` ${JSON.stringify(thrown.extra)}` : ''
      throw new Error(`The story stops at ${step.at.toISOString()}, ${step.what}: ${thrown instanceof Error ? thrown.message : String(thrown)}${more}`, { cause: thrown })
    }
  }
  return steps.length
}

function stepsOf(player: Player, head: StoryHead): Step[] {
  const scene = new Scene(player, head)
  const steps = head.parts.flatMap((part): Step[] => {
    const what = `${head.number} op ${part.op}`
    const [begun, asked] = [schoolInstant(part.begun), part.asked === undefined ? null : schoolInstant(part.asked)]
    const proofAt = typeof part.proof === 'string' ? schoolInstant(part.proof) : asked ? new Date((begun.getTime() + asked.getTime()) / 2) : begun
    let submissionId = ''
    return [
      { at: begun, what: `${what} begun`, run: async () => void (submissionId = await scene.begin(part)) },
      ...(part.proof === null ? [] : [{ at: proofAt, what: `${what} proof`, run: () => scene.prove(part, submissionId) }]),
      ...[part.sheets ?? []].flat().map(evening => ({ at: schoolInstant(evening.at), what: `${what} sheets`, run: () => scene.sheets(evening, submissionId) })),
      ...(asked ? [{ at: asked, what: `${what} asked`, run: () => scene.ask(part, submissionId) }] : []),
      ...(part.review ? [{ at: schoolInstant(part.review.at), what: `${what} reviewed`, run: () => scene.review(part.review as StoryReview, submissionId) }] : []),
    ]
  })
  const { stopped } = head
  return stopped ? [...steps, { at: schoolInstant(stopped.at), what: `${head.number} stopped`, run: () => scene.stop(stopped) }] : steps
}

/** One head and its student, as each step finds them. */
class Scene {
  private headId: string | null = null
  /** Pictures taken so far: tells those of one view and port apart. */
  private shot = 0

  constructor(private readonly player: Player, private readonly head: StoryHead) {}

  private get app(): App {
    return this.player.story.app
  }

  private em(): EntityManager {
    return this.app.orm.em.fork()
  }

  private actor(name: string): Actor {
    const found = this.player.actors.get(name)
    if (!found) throw new Error(`nobody is called ${name}`)
    return found
  }

  private async id(): Promise<string> {
    return this.headId ??= (await this.em().findOneOrFail(PracticeHead, { number: this.head.number })).id
  }

  async begin({ op }: StoryPart): Promise<string> {
    const { submission } = await startDraft(this.em(), this.app, this.actor(this.head.student), await this.id(), op, {})
    return submission.id
  }

  /** Everything still wanted, less what the story leaves out. */
  async prove({ only }: StoryPart, submissionId: string): Promise<void> {
    const em = this.em()
    const student = this.actor(this.head.student)
    const submission = await em.findOneOrFail(Submission, submissionId)
    const head = await findHead(em, this.app, student, await this.id())
    const card = head.casting.$.card as StoryCard
    const { evidence } = await gatherForPart(em, head, submission, submissionId)
    const wanted = wantedProof(stageAsDue(head.rubric.$.rubric, submission.op), evidence, head.firstCylinder, this.head.photos)
    const readings = wanted.readings
      .filter(one => (only?.quantities === undefined || only.quantities.includes(one.quantity)) && (only?.cylinders === undefined || one.cylinder === null || only.cylinders.includes(one.cylinder)) && !(only?.skipSpots?.test(one.spot ?? '') ?? false))
      .flatMap((one) => {
        const read = readIron(card, this.head.number, one, this.head.rules)
        return read ? [{ ...one, ...read, instrument: one.instrument ?? read.instrument }] : []
      })
    const photos = await this.shoot(submission, wanted.photos.filter(photo => only?.views === undefined || only.views.includes(photo.view)))
    const documents = only?.views !== undefined ? [] : wanted.documents.map(note => ({ note, text: `${note}\n${this.head.number}, ${this.head.student}\n\nGenerated for the demo school. A student's own paper would be here.\n` }))
    await handIn(em, this.app, student, submissionId, { readings, photos, documents })
    await em.nativeUpdate(Submission, { id: submissionId }, { note: generatedNote })
  }

  private async shoot({ op, part, tryNumber }: Submission, wanted: readonly PhotoToTake[]): Promise<ProofToHandIn['photos']> {
    const photos: ProofToHandIn['photos'] = []
    for (const photo of wanted) {
      this.shot += 1
      const picture = await this.player.pictures.take({ ...photo, head: this.head.number, op, dummies: op === 50, count: `${part}${tryNumber}-${this.shot}` })
      photos.push({ ...photo, ...picture, card: ['view-1', 'view-2', 'view-12'].includes(photo.view) ? 'SC-01' : null })
    }
    return photos
  }

  async sheets({ at, of, photos: wanted }: SheetEvening, submissionId: string): Promise<void> {
    const student = this.actor(this.head.student)
    const head = await findHead(this.em(), this.app, student, await this.id())
    const card = head.casting.$.card as StoryCard
    for (const [index, sheet] of of.entries()) {
      // A second apart, so that which of them is the newest is plain.
      this.player.story.standAt(new Date(schoolInstant(at).getTime() + index * 1000))
      await handInSheet(this.em(), this.app, student, submissionId, sheetFile(card, this.head, sheet))
    }
    if (wanted === undefined) return
    const photos = await this.shoot(await this.em().findOneOrFail(Submission, submissionId), wanted)
    await handIn(this.em(), this.app, student, submissionId, { readings: [], photos, documents: [] })
  }

  async ask({ note }: StoryPart, submissionId: string): Promise<void> {
    await askForRelease(this.em(), this.app, this.actor(this.head.student), submissionId, note === undefined ? generatedNote : `${note}\n${generatedNote}`)
    await scoreSubmission(this.app, submissionId)
  }

  async review(review: StoryReview, submissionId: string): Promise<void> {
    const reviewer = this.actor(review.by)
    const em = this.em()
    const submission = await findSubmission(em, this.app, reviewer, submissionId, { purpose: 'teach' })
    const input: ReviewInput = {
      seen: submission.version, seenWith: [], decision: review.decision, point: submission.point ?? null, feedback: review.feedback,
      ...(review.condition === undefined ? {} : { condition: review.condition }),
      overrides: [], reasons: [], pins: await this.pins(em, review),
    }
    const loaded = await loadPointCase(em, submission)
    if (review.decision === 'release') {
      input.overrides = loaded.criteria.filter(criterion => instructorGives(criterion) && loaded.rows.some(row => row.result.criterion === criterion.id && row.result.state === 'not-assessed' && !row.override))
        .map(criterion => ({ criterion: criterion.id, state: 'accept' as const, reason: 'Looked at on the iron and in the pictures.' }))
      input.reasons = await this.reasons(submission, loaded, reviewer, input)
    }
    await decideReview(this.em(), this.app, reviewer, submissionId, input)
    await this.markSent()
  }

  /** A reason for every must that is not accepted, by what it is short of. */
  private async reasons(submission: FoundSubmission, loaded: Awaited<ReturnType<typeof loadPointCase>>, reviewer: Actor, { overrides }: ReviewInput): Promise<ReviewInput['reasons']> {
    const given = new Set(overrides.map(one => one.criterion))
    const verdict = await verdictFor(this.em(), submission, loaded, reviewer.id, [])
    return (verdict?.needReason ?? []).filter(one => !given.has(one.criterion)).map((one) => {
      const state = loaded.rows.find(({ result }) => result.criterion === one.criterion && (result.cylinder ?? null) === one.cylinder && (result.side ?? null) === one.side)?.result.state
      return { ...one, reason: state === 'borderline' ? 'Read it again beside the student; close, and nothing more comes off there.' : 'Seen on the iron at the bench; the picture was not taken that evening.' }
    })
  }

  private async pins(em: EntityManager, { pins = [] }: StoryReview): Promise<ReviewInput['pins']> {
    const placed: ReviewInput['pins'] = []
    for (const { view, cylinder, side, x, y, criterion, text } of pins) {
      const [photo] = await em.find(Photo, { view, cylinder, side, submission: { head: await this.id() } }, { orderBy: { takenAt: 'desc' }, limit: 1 })
      if (photo) placed.push({ photoId: photo.id, x, y, criterion, text })
    }
    return placed
  }

  async stop({ by, where, reason, scrapped }: NonNullable<StoryHead['stopped']>): Promise<void> {
    await stopHead(this.em(), this.app, this.actor(by), await this.id(), { where, reason })
    if (scrapped) await this.em().nativeUpdate(PracticeHead, { id: await this.id() }, { state: 'scrapped' })
    await this.markSent()
  }

  /** Messages of the past were sent in the past: nothing of the story reaches a mail server now. */
  private async markSent(): Promise<void> {
    const at = this.app.clock.schoolNow()
    await this.em().getConnection().execute('update mail set state = \'sent\', tries = 1, created_at = ?, sent_at = ?, provider_id = \'played with the story\' where state = \'waiting\'', [at, at])
  }
}
