import { afterAll, beforeAll, expect, it } from 'vitest'
import { MediaAsset } from '#server/db/entities/MediaAsset'
import { MediaTrack } from '#server/db/entities/MediaTrack'
import { rebuildPassages } from '#server/services/lessons/rebuild-passages'
import type { SearchAnswer } from '#shared/contract/lessons'
import { openHarness, type Harness } from '../harness'
import { serveApi, type Api, type Caller } from '../http'
import { makeSchool, type TestSchool } from '../review/school'
import { documentOf, heading, makeCurriculum, words, type Curriculum } from './curriculum'

let harness: Harness
let school: TestSchool
let curriculum: Curriculum
let api: Api
let imre: Caller
let hanne: Caller
let film: string
let bowl: string

beforeAll(async () => {
  harness = await openHarness()
  school = await makeSchool(harness)
  curriculum = await makeCurriculum(school)
  await curriculum.place(school.imre, 'here', 1)
  film = await school.em().transactional(async (tx) => {
    const made = tx.create(MediaAsset, { kind: 'video', title: 'Dummy valves', name: 'dummy-valves', upload: null, key: 'k', contentType: 'video/mp4', bytes: 1, width: null, height: null, durationSeconds: 30, state: 'ready', problem: null, addedBy: null, addedAt: new Date() })
    const cues = [
      { fromMs: 1000, toMs: 3000, text: 'A whole valve is a poor lid, with no lip.' },
      { fromMs: 3200, toMs: 6000, text: 'Look for a lip\nat twelve o\'clock,' },
      { fromMs: 6100, toMs: 9000, text: 'before the cutter turns.' },
      { fromMs: 20_000, toMs: 22_000, text: 'Wipe the seat.' },
    ]
    tx.persist([made, tx.create(MediaTrack, { asset: made, kind: 'captions', language: 'en', vtt: 'WEBVTT', cues, savedBy: null, savedAt: new Date() })])
    return made.id
  })
  await curriculum.lesson(5, 'dummy-valves', 'Dummy valves', [words('A lid for the seat.'), heading('Fit'), words('Hold it down with a light spring and keeper.'), { type: 'clip', attrs: { asset: film, start: 0, end: 15, caption: 'Dropped in.' } }, heading('Grit'), words('Plug the guides <b>with</b> rod.')])
  bowl = await curriculum.lesson(7, 'bowl', 'The bowl', [heading('Where the ball must touch'), words('The spring of the wall is no guide.'), { type: 'caution', content: [words('A running ball grabs.')] }])
  api = await serveApi(harness)
  ;[imre, hanne] = await Promise.all([api.as(school.imre), api.as(school.hanne)])
})
afterAll(async () => {
  await api?.close()
  await harness?.close()
})

const search = async (q: string, who = imre) => (await who.get<SearchAnswer>(`/api/search?q=${encodeURIComponent(q)}`)).body
const found = (answer: SearchAnswer) => answer.items.map(hit => [hit.lesson.slug, hit.kind, hit.anchor, hit.seconds])

it('opens at the heading the words stand under, and marks them', async () => {
  const answer = await search('light spring')
  expect(answer.spelling).toBe(false)
  expect(found(answer)).toEqual([['dummy-valves', 'text', 'fit', null]])
  expect(answer.items[0]).toMatchObject({ heading: 'Fit', clip: null, lesson: { number: 5, title: 'Dummy valves' } })
  expect(answer.items[0]?.snippet).toContain('Hold it down with a ⟦light⟧ ⟦spring⟧ and keeper.')
})

it('finds what is said in a film, and opens at the second it begins, once', async () => {
  expect(found(await search('lip at twelve o\'clock'))).toEqual([['dummy-valves', 'caption', 'clip-1', 3.2]])
  expect((await search('"poor lid"')).items).toMatchObject([{ kind: 'caption', clip: film, seconds: 1, heading: 'Fit', snippet: expect.stringContaining('a ⟦poor⟧ ⟦lid⟧') }])
  // Said twice, in two captions one after the other: both.
  expect((await search('lip')).items.map(hit => hit.seconds).sort()).toEqual([1, 3.2])
  // Across two captions: where it begins.
  expect(found(await search('"twelve o\'clock before the cutter"'))).toEqual([['dummy-valves', 'caption', 'clip-1', 3.2]])
})

it('leaves out what is said after the part a lesson shows', async () => {
  expect((await search('wipe the seat')).items.filter(hit => hit.kind === 'caption')).toEqual([])
})

it('finds a lesson by its title, a heading by its words, and inside our blocks', async () => {
  expect((await search('dummy valves')).items[0]).toMatchObject({ lesson: { slug: 'dummy-valves' }, anchor: '' })
  expect(found(await search('ball must touch'))[0]).toEqual(['bowl', 'text', 'where-the-ball-must-touch', null])
  expect(found(await search('running grabs'))).toEqual([['bowl', 'text', 'where-the-ball-must-touch', null]])
})

it('takes the same word in another form, leaves out what is excluded, and ranks words that stand together first', async () => {
  expect(found(await search('springs'))).toHaveLength(2)
  expect(found(await search('spring -keeper')).map(([slug]) => slug)).toEqual(['bowl'])
})

it.each([['half a word', 'sprin keep', 'fit'], ['a misspelt word', 'dumy valvs', ''], ['two misspelt words', 'lihgt sprnig', 'fit'], ['words of which only one is known', 'spring zzyzx', 'fit']])('finds %s and says that it guessed', async (_what, q, anchor) => {
  const answer = await search(q)
  expect(answer.spelling).toBe(true)
  expect(answer.items.map(hit => hit.anchor)).toContain(anchor)
})

it('finds nothing where there is nothing, without guessing wildly', async () => {
  expect(await search('xylophone')).toEqual({ items: [], spelling: false })
})

it.each(['', ' ', '!!!', '\' or 1=1 --', '\\', '"', '((((', ':*', '&|!', 'a & b | !c', '%', '___', '-', '-spring', '⟦', 'the', 'the of and', '<->', '\'; drop table lesson; --', 'ä ö', '日本', 'a'.repeat(200)])('takes %j for words, whatever is in it', async (q) => {
  const { status, body } = await imre.get<SearchAnswer>(`/api/search?q=${encodeURIComponent(q)}`)
  expect(status).toBe(200)
  expect(Array.isArray(body.items)).toBe(true)
})

it.each([['a NUL', 'a%00b'], ['a search longer than people write', 'a'.repeat(201)]])('refuses %s', async (_what, q) => {
  expect((await imre.get(`/api/search?q=${q}`)).body).toMatchObject({ status: 422, code: 'input_invalid' })
  expect((await imre.get('/api/search')).body).toMatchObject({ status: 422, code: 'input_invalid' })
})

it('shows nothing to whoever may not read lessons, and not the lessons of another course', async () => {
  const stranger = await school.person('Stranger Asker', ['student'])
  expect((await (await api.as(stranger)).get('/api/search?q=spring')).body).toMatchObject({ status: 403, code: 'lessons_not_open' })
  const other = await school.em().transactional(async (tx) => {
    const [course] = await tx.getConnection().execute<{ id: string }[]>('insert into course (id, code, title, summary, created_at) values (gen_random_uuid(), \'other\', \'Other\', \'\', now()) returning id', [], 'all', tx.getTransactionContext())
    await tx.getConnection().execute('update course_module set course_id = ? where id = (select module_id from lesson where id = ?)', [course?.id, bowl], 'run', tx.getTransactionContext())
    return course?.id
  })
  try {
    expect(other).toBeDefined()
    expect(found(await search('springs'))).toEqual([])
    expect(found(await search('springs', hanne))).toHaveLength(2)
  }
  finally {
    await school.em().getConnection().execute('update course_module set course_id = ?', [curriculum.courseId])
  }
})

it('finds the new words and not the old once a lesson is published anew, and captions once they are put right', async () => {
  await hanne.post('/api/lessons/bowl/draft', { seen: 0, title: 'The bowl', document: documentOf(heading('Where the ball must touch'), words('Mind the ledge.')) })
  await hanne.post('/api/lessons/bowl/publish', { seen: 1, whatChanged: 'Shorter.', why: 'Nobody read it.' })
  expect(found(await search('ledge'))).toEqual([['bowl', 'text', 'where-the-ball-must-touch', null]])
  expect(found(await search('grabs'))).toEqual([])
  await school.em().transactional(async (tx) => {
    await tx.nativeUpdate(MediaTrack, { asset: film }, { cues: [{ fromMs: 500, toMs: 2000, text: 'A sliver shows.' }] })
    const rows = await tx.getConnection().execute<{ id: string }[]>('select id from lesson where slug = \'dummy-valves\'', [], 'all', tx.getTransactionContext())
    await rebuildPassages(tx, rows[0]?.id ?? '')
  })
  expect(found(await search('sliver'))).toEqual([['dummy-valves', 'caption', 'clip-1', 0.5]])
})
