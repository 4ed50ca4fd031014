import { readFileSync } from 'node:fs'
import type { EntityManager } from '@mikro-orm/postgresql'
import { Casting } from '#server/db/entities/Casting'
import { Cohort } from '#server/db/entities/Cohort'
import { ConsentText, type ConsentChoice, type ConsentClause } from '#server/db/entities/Consent'
import { CohortStaff } from '#server/db/entities/CohortStaff'
import { CriterionResult } from '#server/db/entities/CriterionResult'
import { Photo } from '#server/db/entities/Photo'
import { PracticeHead } from '#server/db/entities/PracticeHead'
import { RubricVersion } from '#server/db/entities/RubricVersion'
import { ScoreSet } from '#server/db/entities/ScoreSet'
import { Submission } from '#server/db/entities/Submission'
import { Upload } from '#server/db/entities/Upload'
import { User, type Role } from '#server/db/entities/User'
import type { Actor } from '#server/utils/actor'
import { reviewInput, type ReviewInput } from '#shared/contract/inputs'
import type { CastingCard } from '#shared/domain/geometry/casting'
import { criteriaOfPart, portsOfPart } from '#shared/domain/rubric/covers'
import type { CriterionState, Rubric } from '#shared/domain/rubric/criterion'
import type { SubmissionPart } from '#shared/domain/rubric/evidence'
import { neededUnits } from '#shared/domain/rubric/needed-units'
import { stageAsDue } from '#shared/domain/rubric/stage-as-due'
import type { Side } from '#shared/domain/units/port'
import type { Harness } from '../harness'

// The school's own rubric and castings, so that what is decided here is decided on what the school decides on.
const content = <Value>(name: string): Value => JSON.parse(readFileSync(new URL(`../../../content/school/${name}`, import.meta.url), 'utf8')) as Value
export const schoolRubric = content<Rubric>('rubric.json')
const rubric = schoolRubric
export const schoolConsent = content<{ clauses: ConsentClause[], choices: ConsentChoice[] }>('consent.json')
const castings = content<CastingCard[]>('castings.json')

/** Change of one made result: without cylinder or side, of every result of that criterion. */
export interface Change { criterion: string, cylinder?: number, side?: Side, state: CriterionState, value?: number, expandedUncertainty?: number, text?: string, at?: string, band?: CriterionResult['band'] }

/** A cohort with one head, its people, and submissions scored as a test says. */
export interface TestSchool {
  em: () => EntityManager
  imre: Actor
  hanne: Actor
  marit: Actor
  silas: Actor
  ingrid: Actor
  corin: Actor
  /** Teaches another cohort. */
  stranger: Actor
  headId: string
  cohortId: string
  now: () => Date
  /** A scored submission whose results are all accept, but for the changes. */
  scored: (of: { op: number, part?: SubmissionPart, point?: string | null, tryNumber?: number, head?: string, askedAt?: Date, changes?: Change[] }) => Promise<Submission>
  /** What adding evidence does: raises the version; `score` scores it again, all accept but for the changes. */
  moveOn: (submissionId: string, changes?: Change[] | null) => Promise<number>
  photo: (submissionId: string, change?: { setAsideAt?: Date }) => Promise<string>
  anotherHead: (number: string, student?: Actor) => Promise<string>
  person: (name: string, roles: Role[]) => Promise<Actor>
}

/** Everything the program needs before anybody has done anything. */
export async function makeSchool(harness: Pick<Harness, 'app'>): Promise<TestSchool> {
  const em = (): EntityManager => harness.app.orm.em.fork()
  const now = (): Date => harness.app.clock.schoolNow()
  const card = castings.find(one => one.scope === 'D')
  if (!card) throw new Error('content/school has no casting of scope D')

  async function person(name: string, roles: Role[]): Promise<Actor> {
    const email = `${name.toLowerCase().split(' ')[0]}@sallowbeck.example`
    const user = await em().transactional(async (tx) => {
      const made = tx.create(User, { email, name, roles, passwordHash: null, handAllowanceMm: null, createdAt: new Date() })
      tx.persist(made)
      return made
    })
    return { id: user.id, name, email, roles, unit: 'mm', sessionId: crypto.randomUUID() }
  }
  const imre = await person('Imre Tallowin', ['student'])
  const hanne = await person('Hanne Brockwell', ['instructor'])
  const marit = await person('Marit Garsdale', ['instructor'])
  const silas = await person('Silas Okonray', ['instructor'])
  const stranger = await person('Ottoline Karr', ['instructor'])
  const ingrid = await person('Ingrid Tarnhow', ['safety'])
  const corin = await person('Corin Ashdown', ['admin'])

  const began = new Date(now().getTime() - 30 * 24 * 3_600_000)
  const ids = await em().transactional(async (tx) => {
    const casting = tx.create(Casting, { code: 'SL-41', name: 'Dunnock', version: 1, card, createdAt: began })
    const version = tx.create(RubricVersion, { version: 1, rubric, savedBy: null, savedAt: began })
    const cohort = tx.create(Cohort, { code: 'ALD-26', name: 'Alder', startsOn: '2026-02-10', endsOn: '2026-05-07', pattern: 'evenings', places: 8, createdAt: began })
    const other = tx.create(Cohort, { code: 'CIN-26', name: 'Cinder', startsOn: '2026-09-21', endsOn: '2026-12-18', pattern: 'weeks', places: 8, createdAt: began })
    const staff = (who: Actor, of: Cohort, posts: string[], points: string[]) => tx.create(CohortStaff, { cohort: of, person: tx.getReference(User, who.id), points, posts, from: began, until: null, givenBy: null })
    const head = tx.create(PracticeHead, { number: 'DNK-0147', student: tx.getReference(User, imre.id), cohort, casting, rubric: version, state: 'working', acidCleaned: false, receivedAt: began })
    const consent = tx.create(ConsentText, { version: 1, clauses: schoolConsent.clauses, choices: schoolConsent.choices, standsFrom: 1, savedBy: null, savedAt: began })
    tx.persist([
      casting, version, cohort, other, head, consent,
      staff(hanne, cohort, ['lead'], ['hold-1', 'hold-4', 'hold-5', 'hold-6', 'hold-7', 'hold-8', 'witness-2']),
      staff(marit, cohort, ['air', 'second'], ['hold-2', 'hold-5', 'hold-8']),
      staff(silas, cohort, ['chamber'], ['hold-1', 'hold-3', 'witness-1', 'witness-3']),
      staff(stranger, other, ['lead'], ['hold-4', 'hold-8']),
    ])
    return { head, cohort, casting, version }
  })

  async function addSet(tx: EntityManager, submission: Submission, changes: readonly Change[]): Promise<void> {
    const stage = stageAsDue(rubric, submission.op)
    const criteria = criteriaOfPart(stage, submission.part)
    const units = neededUnits({ code: 'hold-0', kind: 'hold', when: 'after', signers: [], needs: criteria.map(one => one.id) }, rubric.stages, card!, submission.ports, false)
    const set = tx.create(ScoreSet, { submission, version: submission.version, score: 100, word: 'Sound', restsOn: { rubric: 1, casting: 'SL-41 v1', method: 'by hand', readings: [], photos: [], documents: [], sheets: [] }, scoredAt: now() })
    tx.persist(set)
    units.forEach(({ criterion, unit }, position) => {
      const change = changes.find(one => one.criterion === criterion && (one.cylinder === undefined || one.cylinder === unit.cylinder) && (one.side === undefined || one.side === unit.side))
      const known = criteria.find(one => one.id === criterion)
      tx.persist(tx.create(CriterionResult, {
        set, criterion, cylinder: unit.cylinder, side: unit.side, at: change?.at ?? null, liftMm: null, state: change?.state ?? 'accept', value: change?.value ?? null, unit: known?.unit ?? '',
        expandedUncertainty: change?.expandedUncertainty ?? null, pConform: null, metalLeft: null, text: change?.text ?? `Made for ${criterion}.`, trace: [], band: change?.band ?? null, position,
      }))
    })
    const stops = new Set(criteria.filter(one => one.safetyStop).map(one => one.id))
    Object.assign(submission, { scoredVersion: submission.version, scoredAt: now(), state: 'scored', score: 100, word: 'Sound', stopStands: changes.some(one => stops.has(one.criterion) && ['reject', 'borderline'].includes(one.state)) })
  }

  return {
    em, imre, hanne, marit, silas, ingrid, corin, stranger, person, now,
    headId: ids.head.id,
    cohortId: ids.cohort.id,
    async scored({ op, part = 'rest', point = null, tryNumber = 1, head = ids.head.id, askedAt = now(), changes = [] }) {
      return em().transactional(async (tx) => {
        const submission = tx.create(Submission, {
          head: tx.getReference(PracticeHead, head), op, part, point, tryNumber, version: 1, ports: portsOfPart(stageAsDue(rubric, op), part, card, 1), startedBy: tx.getReference(User, imre.id), createdAt: askedAt,
          askedAt, scoredVersion: null, scoredAt: null, decidedAt: null, decision: null, score: null, word: null, state: 'asked',
        })
        tx.persist(submission)
        await addSet(tx, submission, changes)
        return submission
      })
    },
    async moveOn(submissionId, changes = []) {
      return em().transactional(async (tx) => {
        const submission = await tx.findOneOrFail(Submission, submissionId)
        submission.version += 1
        submission.state = 'asked'
        if (changes !== null) await addSet(tx, submission, changes)
        return submission.version
      })
    },
    async photo(submissionId, { setAsideAt } = {}) {
      return em().transactional(async (tx) => {
        const key = crypto.randomUUID()
        const upload = tx.create(Upload, { owner: tx.getReference(User, imre.id), purpose: 'photo', key, filename: 'a.jpg', bytes: 10, contentType: 'image/jpeg', sha256: 'a'.repeat(64), multipartId: null, detectedType: 'image/jpeg', state: 'used', createdAt: now(), receivedAt: now(), usedAt: now(), usedBy: null })
        const photo = tx.create(Photo, { submission: tx.getReference(Submission, submissionId), upload, view: 'view-12', cylinder: 1, side: 'intake', spot: null, card: null, seatDepth: null, clockMark: null, problem: null, width: 4000, height: 3000, thumbKey: null, previewKey: null, addedBy: tx.getReference(User, imre.id), takenAt: now(), setAsideAt: setAsideAt ?? null })
        tx.persist([upload, photo])
        return photo.id
      })
    },
    async anotherHead(number, student = imre) {
      return em().transactional(async (tx) => {
        const head = tx.create(PracticeHead, { number, student: tx.getReference(User, student.id), cohort: tx.getReference(Cohort, ids.cohort.id), casting: tx.getReference(Casting, ids.casting.id), rubric: tx.getReference(RubricVersion, ids.version.id), state: 'working', acidCleaned: false, receivedAt: began })
        tx.persist(head)
        return head.id
      })
    },
  }
}

/** A review body as the route would have read it. */
export function review(given: Partial<ReviewInput> & Pick<ReviewInput, 'decision'>): ReviewInput {
  return reviewInput.parse({ seen: 1, ...given })
}
