import { ref, type EntityManager } from '@mikro-orm/core'
import { Seeder } from '@mikro-orm/seeder'
import type { CastingCard } from '../../../shared/domain/geometry/casting'
import type { RubricPoint } from '../../../shared/domain/rubric/criterion'
import { Casting } from '../entities/Casting'
import { Clearance } from '../entities/Clearance'
import type { Cohort } from '../entities/Cohort'
import { CohortStaff } from '../entities/CohortStaff'
import { Instrument } from '../entities/Instrument'
import { MediaAsset } from '../entities/MediaAsset'
import { PracticeHead } from '../entities/PracticeHead'
import { RubricVersion } from '../entities/RubricVersion'
import { ScaleCard } from '../entities/ScaleCard'
import { SchoolSetting } from '../entities/SchoolSetting'
import { User, type Role } from '../entities/User'
import { readContent, type SchoolContent } from './content'
import { makeConsents } from './demo-consents'
import { makeLessons } from './demo-lessons'
import { makeCohorts, makePlaces } from './demo-places'

/** What the seeder is told: the school's instant, and the hash of the one password everybody has. */
export interface DemoStart { until: Date, passwordHash: string, seededAt: Date }

const day = 24 * 3_600_000
const rolesOf: Readonly<Record<string, Role>> = { 'school admin': 'admin', 'shop safety officer': 'safety' }

/**
 * The demo school before anybody has worked in it: people, cohorts, bench places as they stand at the instant, who signs what,
 * clearances, castings, the rubric's first version, gauges, lessons, and a core for every student. The story is played on top of it.
 *
 * Needs its start (`call(em, [DemoSeeder], start)`): `npm run seed` gives it.
 */
export class DemoSeeder extends Seeder<Partial<DemoStart>> {
  override async run(em: EntityManager, context: Partial<DemoStart> = {}): Promise<void> {
    const { until, passwordHash, seededAt } = context
    if (!until || !passwordHash || !seededAt) throw new Error('The demo school is seeded by `npm run seed`, which says when it stands and how its people sign in.')
    const content = readContent()
    const { rubric } = content
    const people = makePeople(em, content, passwordHash, until)
    const cohorts = makeCohorts(em, content, until)
    const clips = await em.find(MediaAsset, { name: { $ne: null } })
    const course = makeLessons(em, content, new Map(clips.map(one => [one.name ?? '', one.id])), instant('2025-09-01'))
    for (const cohort of cohorts.values()) cohort.course = ref(course)
    makePlaces(em, content, people, cohorts, until)
    makeStaff(em, content, people, cohorts)
    makeClearances(em, content, people, until)
    makeConsents(em, content, people, until)

    const began = instant('2025-09-01')
    const castings = content.castings.map(({ code, name, ...card }) => em.create(Casting, { code, name, version: 1, card: { code, name, ...card } as CastingCard, createdAt: began }))
    const first = em.create(RubricVersion, { version: 1, rubric, note: rubric.note, savedBy: null, savedAt: began })
    makeHeads(em, content, people, cohorts, castings, first, until)
    for (const one of content.instruments) em.create(Instrument, { ...one, dueOn: '2026-09-01', createdAt: began })
    for (const one of content.start.scaleCards) em.create(ScaleCard, { ...one, createdAt: began })
    em.create(SchoolSetting, { name: 'school', value: content.scenario.school })
    em.create(SchoolSetting, { name: 'demo-clock', value: { demoNow: until.toISOString(), seededAt: seededAt.toISOString() } })
    await em.flush()
  }
}

type People = Map<string, User>
type Cohorts = Map<string, Cohort>

/** A date's beginning; the story happens in a zone within an hour of UTC, and nothing in it happens at midnight. */
const instant = (date: string): Date => new Date(`${date}T00:00:00Z`)

function get<Value>(map: ReadonlyMap<string, Value>, name: string): Value {
  const found = map.get(name)
  if (!found) throw new Error(`content/school names ${name}, who or which is not there`)
  return found
}

function makePeople(em: EntityManager, { scenario }: SchoolContent, passwordHash: string, until: Date): People {
  const make = (name: string, roles: Role[]): [string, User] => {
    const email = `${(name.split(' ')[0] ?? name).toLowerCase()}@sallowbeck.example`
    return [name, em.create(User, { email, name, roles, passwordHash, unit: 'mm', handAllowanceMm: null, createdAt: until })]
  }
  return new Map([
    ...scenario.staff.map(({ name, role }) => make(name, [rolesOf[role] ?? 'instructor'])),
    ...scenario.students.map(({ name }) => make(name, ['student'])),
    ...scenario.alumni.map(({ name }) => make(name, ['student'])),
  ])
}

/** Instructors of every cohort. They keep its heads for a year after its end, to answer for results. */
function makeStaff(em: EntityManager, { scenario, rubric }: SchoolContent, people: People, cohorts: Cohorts): void {
  const points: RubricPoint[] = rubric.stages.flatMap(stage => stage.points)
  const lead = scenario.staff.find(one => one.posts.includes('lead'))
  for (const cohort of cohorts.values()) {
    for (const { name, role, signs, posts, stands_in_for: standsInFor } of scenario.staff) {
      if (rolesOf[role] !== undefined) continue
      const held = new Set([...posts, ...standsInFor])
      const mayPoints = points.filter(point => signs.includes(point.code) || point.signers.some(post => held.has(post))).map(point => point.code)
      em.create(CohortStaff, {
        cohort, person: get(people, name), points: mayPoints, posts,
        from: instant(cohort.startsOn), until: new Date(instant(cohort.endsOn).getTime() + 365 * day),
        givenBy: name === lead?.name || !lead ? null : get(people, lead.name),
      })
    }
  }
}

/** Everybody is cleared for the shop's tools on the first evening of their cohort, for a year, by the safety officer. */
function makeClearances(em: EntityManager, { scenario, start }: SchoolContent, people: People, until: Date): void {
  const officer = scenario.staff.find(one => rolesOf[one.role] === 'safety')
  if (!officer) throw new Error('content/school/scenario.json has no safety officer')
  const dates = new Map(scenario.cohorts.map(one => [one.code, one.start]))
  for (const { name, cohort, moved_to: movedTo } of scenario.students) {
    if (movedTo) continue
    const from = new Date(`${get(dates, cohort)}T18:10:00Z`)
    if (from > until) continue
    for (const tool of start.clearances) {
      em.create(Clearance, { person: get(people, name), tool, from, until: new Date(from.getTime() + 365 * day), givenBy: get(people, officer.name), withdrawnAt: null })
    }
  }
}

function makeHeads(em: EntityManager, { scenario, start }: SchoolContent, people: People, cohorts: Cohorts, castings: readonly Casting[], rubric: RubricVersion, until: Date): void {
  for (const { name, cohort: code, head } of scenario.students) {
    const own = start.students[name]
    if (head === null || !own) continue
    const cohort = get(cohorts, code)
    const received = new Date(`${cohort.startsOn}T18:20:00Z`)
    const cores = [{ number: head, firstCylinder: own.firstCylinder, receivedAt: received }, ...(own.second ? [{ ...own.second, receivedAt: new Date(own.second.receivedAt) }] : [])]
    for (const core of cores.filter(one => one.receivedAt <= until)) {
      const casting = castings.find(one => core.number.startsWith(String((one.card as { prefix?: string }).prefix)))
      if (!casting) throw new Error(`no casting of content/school is numbered as ${core.number}`)
      em.create(PracticeHead, { ...core, student: get(people, name), cohort, casting, rubric, state: 'received', acidCleaned: false })
    }
  }
}
