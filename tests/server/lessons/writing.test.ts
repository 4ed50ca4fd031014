import { afterAll, beforeAll, expect, it } from 'vitest'
import { AuditEvent } from '#server/db/entities/AuditEvent'
import { LessonDraft } from '#server/db/entities/LessonDraft'
import { LessonProgress } from '#server/db/entities/LessonProgress'
import { LessonVersion } from '#server/db/entities/LessonVersion'
import { Mail } from '#server/db/entities/Mail'
import { MediaAsset } from '#server/db/entities/MediaAsset'
import { PracticeHead } from '#server/db/entities/PracticeHead'
import { deepestDocument, largestDocument, type DraftView, type LessonView, type PreviewView } from '#shared/contract/lessons'
import type { LessonNode } from '#shared/contract/lesson-document'
import type { Problem } from '#shared/contract/problem'
import { openHarness, type Harness } from '../harness'
import { serveApi, type Api, type Caller } from '../http'
import { makeSchool, type TestSchool } from '../review/school'
import { documentOf, heading, makeCurriculum, words, type Curriculum } from './curriculum'

let harness: Harness
let school: TestSchool
let curriculum: Curriculum
let api: Api
let hanne: Caller
let silas: Caller
let imre: Caller
let count = 20

beforeAll(async () => {
  harness = await openHarness()
  school = await makeSchool(harness)
  curriculum = await makeCurriculum(school)
  await curriculum.place(school.imre, 'here', 1)
  api = await serveApi(harness)
  ;[hanne, silas, imre] = await Promise.all([api.as(school.hanne), api.as(school.silas), api.as(school.imre)])
})
afterAll(async () => {
  await api?.close()
  await harness?.close()
})

/** A lesson of its own for each test. */
async function lesson(...content: LessonNode[]): Promise<{ id: string, slug: string }> {
  count += 1
  const slug = `lesson-${count}`
  return { id: await curriculum.lesson(count, slug, 'Layout', content.length > 0 ? content : [words('The old words.')]), slug }
}
const save = (who: Caller, slug: string, seen: number, document: unknown, title = 'Layout') => who.post<DraftView & Problem & { theirs?: DraftView }>(`/api/lessons/${slug}/draft`, { seen, title, document })
const publish = (who: Caller, slug: string, seen: number) => who.post<{ version: number } & Problem>(`/api/lessons/${slug}/publish`, { seen, whatChanged: 'New words', why: 'The old were wrong.' })

it('begins a draft with what is published, makes nothing by looking, and keeps what is typed', async () => {
  const { slug, id } = await lesson()
  const before = (await hanne.get<DraftView>(`/api/lessons/${slug}/draft`)).body
  expect(before).toMatchObject({ revision: 0, title: 'Layout', savedBy: null, publishedVersion: 1, document: documentOf(words('The old words.')) })
  expect(await school.em().count(LessonDraft, { lesson: id })).toBe(0)
  const { status, body } = await save(hanne, slug, 0, documentOf(words('New words.')), 'Layout, again')
  expect([status, body.revision, body.savedBy]).toEqual([200, 1, 'Hanne Brockwell'])
  expect((await silas.get<DraftView>(`/api/lessons/${slug}/draft`)).body).toMatchObject({ revision: 1, title: 'Layout, again', document: documentOf(words('New words.')) })
  // Readers see nothing of it.
  expect((await imre.get<LessonView>(`/api/lessons/${slug}`)).body).toMatchObject({ title: 'Layout', html: '<p>The old words.</p>', hasDraft: false })
})

it('refuses a save over somebody else\'s, answers with theirs, and keeps both to be chosen from', async () => {
  const { slug } = await lesson()
  await save(hanne, slug, 0, documentOf(words('Hanne\'s.')))
  const late = await save(silas, slug, 0, documentOf(words('Silas\'s.')))
  expect([late.status, late.body.code]).toEqual([409, 'draft_stale'])
  expect(late.body.theirs).toMatchObject({ revision: 1, savedBy: 'Hanne Brockwell', document: documentOf(words('Hanne\'s.')) })
  expect((await save(silas, slug, 1, documentOf(words('Silas\'s.')))).body.revision).toBe(2)
})

it('lets one of two through who save over the same at the same moment', async () => {
  const { slug } = await lesson()
  const both = await Promise.all([hanne, silas].map((who, n) => save(who, slug, 0, documentOf(words(`By ${n}.`)))))
  expect(both.map(one => one.status).sort()).toEqual([200, 409])
  const kept = both.find(one => one.status === 200)?.body
  expect(both.find(one => one.status === 409)?.body.theirs).toMatchObject({ revision: 1, document: kept?.document })
})

it('refuses a save begun before somebody published, though the draft it was over is gone', async () => {
  const { slug } = await lesson()
  await save(hanne, slug, 0, documentOf(words('Hanne\'s.')))
  expect((await publish(hanne, slug, 1)).body).toMatchObject({ version: 2 })
  // Silas opened version 1 (revision 0), and typed all the while.
  const late = await save(silas, slug, 0, documentOf(words('Silas\'s.')))
  expect([late.status, late.body.theirs?.publishedVersion, late.body.theirs?.document]).toEqual([409, 2, documentOf(words('Hanne\'s.'))])
  expect((await publish(hanne, slug, 1)).body.code).toBe('draft_stale')
})

it('gives the same answer to the same save sent twice under one key', async () => {
  const { slug } = await lesson()
  const key = crypto.randomUUID()
  const body = { seen: 0, title: 'Layout', document: documentOf(words('Once.')) }
  const answers = [await hanne.post(`/api/lessons/${slug}/draft`, body, key), await hanne.post(`/api/lessons/${slug}/draft`, body, key)]
  expect(answers.map(one => [one.status, one.body.revision])).toEqual([[200, 1], [200, 1]])
})

const nested = (depth: number): unknown => depth === 0 ? words('core') : { type: 'caution', content: [nested(depth - 1)] }
it.each([
  ['an unknown block', documentOf({ type: 'iframe', attrs: { src: 'https://elsewhere.example' } }), 'document_invalid', 'document.content.0.type'],
  ['a wrong attribute', documentOf({ type: 'paragraph', attrs: { onclick: 'alert(1)' } }), 'document_invalid', 'document.content.0.attrs.onclick'],
  ['a link that runs', documentOf({ type: 'paragraph', content: [{ type: 'text', text: 'a', marks: [{ type: 'link', attrs: { href: 'javascript:alert(1)' } }] }] }), 'document_invalid', 'document.content.0.content.0.marks.0.attrs.href'],
  ['a block nested deeper than a page', { type: 'doc', content: [nested(deepestDocument - 2)] }, 'document_invalid', `document${'.content.0'.repeat(deepestDocument)}`],
  ['a text that is no document', { type: 'paragraph' }, 'input_invalid', 'document.type'],
  ['a NUL in the text', documentOf(words('a\0b')), 'document_invalid', 'document.content.0.content.0.text'],
  ['a lone surrogate in the text', documentOf(words('a\uD800b')), 'document_invalid', 'document.content.0.content.0.text'],
])('refuses %s, says where, and keeps nothing of it', async (_what, document, code, path) => {
  const { slug, id } = await lesson()
  for (const route of ['draft', 'preview']) {
    const { status, body } = await hanne.post<Problem>(`/api/lessons/${slug}/${route}`, { ...(route === 'draft' ? { seen: 0 } : {}), title: 'Layout', document })
    expect([status, body.code]).toEqual([422, code])
    expect(body.issues?.map(issue => issue.path)).toContain(path)
  }
  expect(await school.em().count(LessonDraft, { lesson: id })).toBe(0)
})

it('refuses a document made to exhaust whoever reads it, with and without a key', async () => {
  const { slug } = await lesson()
  const depth = 40_000
  const raw = `{"seen":0,"title":"a","document":{"type":"doc","content":${'[{"type":"caution","content":'.repeat(5000)}[]${'}]'.repeat(5000)}}}`
  const arrays = `{"seen":0,"title":"a","document":{"type":"doc","content":${'['.repeat(depth)}${']'.repeat(depth)}}}`
  for (const body of [raw, arrays]) {
    for (const headers of [{}, { 'idempotency-key': crypto.randomUUID() }] as Record<string, string>[]) {
      const answer = await hanne.call<Problem>('POST', `/api/lessons/${slug}/draft`, body, headers)
      expect([answer.status, answer.body.code]).toEqual([422, 'input_invalid'])
    }
  }
})

it('refuses a document over its size', async () => {
  const { slug } = await lesson()
  const { status, body } = await save(hanne, slug, 0, documentOf(words('a'.repeat(largestDocument))))
  expect([status, body.code]).toEqual([413, 'body_too_large'])
})

it('shows a preview as students see it, with all that publishing would refuse, and keeps nothing', async () => {
  const { slug, id } = await lesson()
  const film = await school.em().transactional(async (tx) => {
    const made = tx.create(MediaAsset, { kind: 'video', title: 'Dummy valves', name: null, upload: null, key: 'k', contentType: 'video/mp4', bytes: 1, width: null, height: null, durationSeconds: 9, state: 'being checked', problem: null, addedBy: null, addedAt: new Date() })
    tx.persist(made)
    return made.id
  })
  const document = documentOf(heading('Fit'), { type: 'figure', attrs: { drawing: 'bowl-curve', alt: ' ' } }, { type: 'figure', attrs: { alt: 'Nothing yet.' } }, { type: 'clip', attrs: { asset: film } }, { type: 'limit', attrs: { criterion: 'Z-99' } }, { type: 'limit', attrs: { criterion: 'W-01' } },
    { type: 'paragraph', content: [{ type: 'text', text: 'there', marks: [{ type: 'link', attrs: { href: '/lessons/nowhere' } }] }] })
  const { body } = await hanne.post<PreviewView>(`/api/lessons/${slug}/preview`, { title: 'Layout', document })
  expect(body.headings).toEqual([{ id: 'fit', text: 'Fit', level: 2 }])
  expect(body.limits['W-01']?.bands).toMatchObject([{ words: '1.52 to 1.78 mm (0.060 to 0.070 in)' }])
  expect(body.problems.map(one => [one.path, one.code])).toEqual([
    ['document.content.1.attrs.alt', 'alt_missing'], ['document.content.2.attrs.asset', 'picture_missing'], ['document.content.3.attrs.asset', 'clip_not_ready'],
    ['document.content.3.attrs.caption', 'clip_caption_missing'], ['document.content.4.attrs.criterion', 'criterion_unknown'], ['document.content.6.content.0', 'link_unknown'],
  ])
  expect(await school.em().count(LessonDraft, { lesson: id })).toBe(0)
  await save(hanne, slug, 0, document)
  const refused = await publish(hanne, slug, 1)
  expect([refused.status, refused.body.code, refused.body.issues?.length]).toEqual([422, 'alt_missing', 6])
  expect(await school.em().count(LessonVersion, { lesson: id })).toBe(1)
  expect(await school.em().count(LessonDraft, { lesson: id })).toBe(1)
})

it('publishes nothing where nothing was written, and nothing that is empty', async () => {
  const { slug } = await lesson()
  expect((await publish(hanne, slug, 1)).body.code).toBe('draft_stale')
  await save(hanne, slug, 0, documentOf({ type: 'paragraph' }))
  expect((await publish(hanne, slug, 1)).body).toMatchObject({ status: 422, code: 'lesson_empty' })
  await save(hanne, slug, 1, documentOf(words('Now.')))
  await publish(hanne, slug, 2)
  expect((await publish(hanne, slug, 3)).body).toMatchObject({ status: 409, code: 'draft_missing' })
})

it('keeps the old version for whoever is mid-head until that head is done, tells them once, and shows everybody else the new', async () => {
  const { slug, id } = await lesson(heading('Fit'), words('The old words.'))
  const bettany = await school.person('Bettany Crake', ['student'])
  await curriculum.place(bettany, 'here', 2)
  await save(hanne, slug, 0, documentOf(heading('Fit'), words('The new words.')), 'Layout anew')
  const { status, body } = await publish(hanne, slug, 1)
  expect([status, body.version]).toEqual([201, 2])

  // Imre has a head under way, Bettany is here and has none.
  expect((await imre.get<LessonView>(`/api/lessons/${slug}`)).body).toMatchObject({ version: 1, title: 'Layout', kept: { newest: 2, whatChanged: 'New words', why: 'The old were wrong.' } })
  expect((await imre.get<LessonView>(`/api/lessons/${slug}?version=2`)).body).toMatchObject({ version: 2, kept: null })
  expect((await (await api.as(bettany)).get<LessonView>(`/api/lessons/${slug}`)).body).toMatchObject({ version: 2, title: 'Layout anew', kept: null })
  const mails = await school.em().find(Mail, { template: 'lesson-changed', key: { $like: '%' } }, { orderBy: { createdAt: 'asc' } })
  const own = mails.filter(mail => mail.subject === `Lesson ${count} has changed`)
  expect(own.map(mail => mail.to)).toEqual([school.imre.email])
  // Words of message 18: handbook 5.5.
  expect(own[0]?.text).toContain('What: New words.')
  expect(own[0]?.text).toContain('Why: The old were wrong.')
  expect(own[0]?.text).toMatch(/mid-head under the old one: keep to it/)
  expect(await school.em().count(AuditEvent, { action: 'lesson-published', subject: `lesson:${id}` })).toBe(1)

  // Changed again: what was kept stays, and says all that changed since.
  await save(silas, slug, 2, documentOf(words('The newest words.')))
  await silas.post(`/api/lessons/${slug}/publish`, { seen: 3, whatChanged: 'Shorter', why: 'Nobody read it.' })
  expect((await imre.get<LessonView>(`/api/lessons/${slug}`)).body).toMatchObject({ version: 1, kept: { newest: 3, whatChanged: 'New words\nShorter' } })
  expect(await school.em().count(Mail, { subject: `Lesson ${count} has changed` })).toBe(2)
  const versions = (await imre.get<{ version: number, publishedBy: string | null }[]>(`/api/lessons/${slug}/versions`)).body
  expect(versions.map(one => [one.version, one.publishedBy])).toEqual([[3, 'Silas Okonray'], [2, 'Hanne Brockwell'], [1, null]])

  // The head is done: the newest.
  const set = (state: 'finished' | 'working') => school.em().nativeUpdate(PracticeHead, { id: school.headId }, { state })
  await set('finished')
  try {
    expect((await imre.get<LessonView>(`/api/lessons/${slug}`)).body).toMatchObject({ version: 3, kept: null })
    // The next head begins with the newest, whatever the one before it kept; then keeps to that.
    const second = await school.anotherHead('DNK-0999')
    await school.em().nativeUpdate(PracticeHead, { id: second }, { receivedAt: new Date(school.now().getTime() + 1000) })
    expect((await imre.get<LessonView>(`/api/lessons/${slug}`)).body).toMatchObject({ version: 3, kept: null })
    await school.em().nativeUpdate(PracticeHead, { id: second }, { receivedAt: new Date(school.now().getTime() - 1) })
    await save(hanne, slug, 4, documentOf(words('Once more.')))
    await publish(hanne, slug, 5)
    const progress = await school.em().findOneOrFail(LessonProgress, { person: school.imre.id, lesson: id }, { populate: ['kept'] })
    expect(progress.kept?.$.version).toBe(3)
    expect((await imre.get<LessonView>(`/api/lessons/${slug}`)).body).toMatchObject({ version: 3, kept: { newest: 4 } })
    await school.em().nativeDelete(PracticeHead, { id: second })
  }
  finally {
    await set('working')
  }
})

it('never changes what was published', async () => {
  const { slug, id } = await lesson()
  await save(hanne, slug, 0, documentOf(words('New.')))
  await publish(hanne, slug, 1)
  await expect(school.em().nativeUpdate(LessonVersion, { lesson: id, version: 1 }, { title: 'Other' })).rejects.toThrow(/never changed/)
  expect((await hanne.get<LessonView>(`/api/lessons/${slug}?version=1`)).body.html).toBe('<p>The old words.</p>')
})

it('makes a lesson nobody reads until it is published, at an address and number of its own', async () => {
  const made = await Promise.all([1, 2].map(() => hanne.post<{ slug: string, number: number }>('/api/lessons', { title: 'Valve lapping!', module: 2, ops: [70, 70] })))
  expect(made.map(one => [one.status, one.body.slug]).sort()).toEqual([[201, 'valve-lapping'], [201, 'valve-lapping-2']])
  expect(Math.abs((made[0]?.body.number ?? 0) - (made[1]?.body.number ?? 0))).toBe(1)
  expect((await imre.get('/api/lessons/valve-lapping')).body).toMatchObject({ status: 404, code: 'lesson_not_found' })
  expect((await imre.get<{ slug: string }[]>('/api/lessons')).body.map(one => one.slug)).not.toContain('valve-lapping')
  expect((await hanne.get<{ slug: string, version: number, ops: number[] }[]>('/api/lessons')).body.find(one => one.slug === 'valve-lapping')).toMatchObject({ version: 0, ops: [70] })
  expect((await hanne.get('/api/lessons/valve-lapping/draft')).body).toMatchObject({ revision: 0, publishedVersion: 0 })
  await save(hanne, 'valve-lapping', 0, documentOf(words('Lap.')), 'Lapping')
  expect((await publish(hanne, 'valve-lapping', 1)).body.version).toBe(1)
  expect((await imre.get<LessonView>('/api/lessons/valve-lapping')).body).toMatchObject({ version: 1, title: 'Lapping', kept: null })
  expect((await hanne.post('/api/lessons', { title: 'Nowhere', module: 9 })).body).toMatchObject({ status: 422, code: 'module_unknown' })
  expect((await imre.post('/api/lessons', { title: 'Mine', module: 1 })).status).toBe(403)
})
