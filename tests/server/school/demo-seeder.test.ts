import { readFileSync } from 'node:fs'
import { afterAll, beforeAll, expect, it } from 'vitest'
import { BenchPlace } from '#server/db/entities/BenchPlace'
import { CohortStaff } from '#server/db/entities/CohortStaff'
import { Instrument } from '#server/db/entities/Instrument'
import { LessonVersion } from '#server/db/entities/LessonVersion'
import { PracticeHead } from '#server/db/entities/PracticeHead'
import { User } from '#server/db/entities/User'
import { seedClips } from '../../../scripts/seed/seed-clips'
import { seedPassages } from '../../../scripts/seed/seed-passages'
import { DemoSeeder } from '#server/db/seeders/DemoSeeder'
import { viewLesson } from '#server/services/lessons/view-lesson'
import { listLessons } from '#server/services/lessons/list-lessons'
import { publishProblems } from '#server/services/lessons/publish-problems'
import { searchLessons } from '#server/services/lessons/search-lessons'
import { wholeRubric } from '#shared/contract/rubric-input'
import { readingQuantities } from '#shared/contract/quantities'
import { readContent } from '#server/db/seeders/content'
import { openHarness, type Harness } from '../harness'

let harness: Harness
const em = () => harness.app.orm.em.fork()

beforeAll(async () => {
  harness = await openHarness()
  await seedClips(em(), harness.app.storage, new Date('2025-09-01T00:00:00Z'))
  await new DemoSeeder().run(em(), { until: new Date('2026-03-26T19:40:00Z'), passwordHash: 'not a hash', seededAt: new Date() })
})
afterAll(() => harness?.close())

it('gives each bench place once: eight of Alder here, Bramble finished, Agnes moved to Cinder', async () => {
  const places = await em().find(BenchPlace, {}, { populate: ['person', 'cohort'] })
  const of = (code: string) => places.filter(one => one.cohort.$.code === code)
  // Who is where: handbook 5.1.
  expect(of('ALD-26').map(one => [one.slot, one.state]).sort()).toEqual([1, 2, 3, 4, 5, 6, 7, 8].map(slot => [slot, 'here']))
  expect(of('BRM-25').filter(one => one.state === 'finished').map(one => one.person?.$.name).sort()).toEqual(['Callum Thrapp', 'Freya Dunmallet', 'Joss Ivelle', 'Mateus Corrigill', 'Parveen Loder'])
  expect(places.filter(one => one.person?.$.name === 'Agnes Wetherlam').map(one => [one.cohort.$.code, one.state]).sort()).toEqual([['BRM-25', 'moved'], ['CIN-26', 'deposit-paid']])
  expect(of('HAZ-24').map(one => one.state)).toEqual(['finished', 'finished'])
})

it('gives each post what it signs and what it stands in for', async () => {
  const links = await em().find(CohortStaff, { cohort: { code: 'ALD-26' } }, { populate: ['person'] })
  const points = (name: string) => links.find(one => one.person?.$.name === name)?.points ?? []
  // Who releases, and who stands in: handbook 3.4.
  expect(points('Hanne Brockwell')).toEqual(expect.arrayContaining(['hold-1', 'hold-2', 'hold-3', 'hold-4', 'hold-5', 'hold-6', 'hold-7', 'hold-8', 'witness-2']))
  expect(points('Silas Okonray')).toEqual(expect.arrayContaining(['hold-1', 'hold-3', 'hold-4', 'hold-6', 'hold-7', 'witness-1']))
  expect(points('Silas Okonray')).not.toContain('hold-2')
  expect(points('Silas Okonray')).not.toContain('hold-5')
  expect(points('Marit Garsdale')).toEqual(expect.arrayContaining(['hold-2', 'hold-5', 'hold-8', 'hold-3']))
  expect(points('Marit Garsdale')).not.toContain('hold-4')
  expect(links.map(one => one.person?.$.name)).not.toContain('Corin Ashdown')
})

it('hands out every core of the story that is out by then', async () => {
  const numbers = (await em().find(PracticeHead, {})).map(one => one.number).sort()
  // Heads of content/school/scenario.json; Dele's second comes in April, after this instant.
  expect(numbers).toEqual(['DNK-0101', 'DNK-0102', 'DNK-0103', 'DNK-0107', 'DNK-0109', 'DNK-0147', 'DNK-0149', 'DNK-0152', 'DNK-0155', 'DNK-0158', 'DNK-0161', 'DNK-0163', 'DNK-0166', 'DNK-0172'])
})

it('has an account for everybody but the sponsor', async () => {
  const users = await em().find(User, {})
  expect(users).toHaveLength(5 + 14 + 3)
  expect(users.map(one => one.email)).toContain('imre@sallowbeck.example')
  expect(users.some(one => one.name === 'Morag Stanyon')).toBe(false)
})

it('has a gauge for every quantity that can be typed, and no gauge for another', async () => {
  const gauges = await em().find(Instrument, {})
  const read = new Set(gauges.flatMap(one => one.quantities))
  expect(Object.keys(readingQuantities).filter(quantity => !read.has(quantity))).toEqual([])
  expect([...read].filter(quantity => !(quantity in readingQuantities))).toEqual([])
})

it('publishes fourteen lessons, each readable, and one for every stage but flow checks share one', async () => {
  const hanne = await em().findOneOrFail(User, { email: 'hanne@sallowbeck.example' })
  const reader = { ...hanne, sessionId: '' }
  const lessons = await listLessons(em(), harness.app, reader)
  expect(lessons.map(one => one.number)).toEqual([1, 2, 3, 4, 5, 6, 7, 8, 9, 10, 11, 12, 13, 14])
  for (const { slug, title } of lessons) expect(await viewLesson(em(), harness.app, reader, slug)).toMatchObject({ title, version: 1, headings: expect.arrayContaining([{ id: 'check-yourself', text: 'Check yourself', level: 2 }]) })
  const needed = new Set(lessons.flatMap(one => one.ops))
  expect(readContent().rubric.stages.map(one => one.op).filter(op => !needed.has(op))).toEqual([])
})

it('starts with a rubric that could be saved as it is', () => {
  expect(wholeRubric.safeParse(readContent().rubric).success).toBe(true)
})

it('starts with lessons that could be published as they are, and finds what is said in their films at the second', async () => {
  const hanne = { ...await em().findOneOrFail(User, { email: 'hanne@sallowbeck.example' }), sessionId: '' }
  for (const { document, title } of await em().find(LessonVersion, {})) expect([title, await publishProblems(em(), document)]).toEqual([title, []])
  await seedPassages(em())
  const [hit] = (await searchLessons(em(), harness.app, hanne, { q: 'lip at twelve o\'clock', limit: 5 })).items
  // Handbook 1.5: "I searched 'lip at twelve o'clock' and it opened the lesson at the line."
  expect(hit).toMatchObject({ kind: 'caption', lesson: { slug: 'dummy-valves' } })
  const captions = readFileSync(new URL('../../../content/media/dummy-valves.captions.vtt', import.meta.url), 'utf8')
  const [, minutes, seconds] = /(\d\d):(\d\d\.\d{3}) --> [^\n]*\n[^\n]*lip at twelve o'clock/i.exec(captions) ?? []
  expect(hit?.seconds).toBe(Number(minutes) * 60 + Number(seconds))
})
