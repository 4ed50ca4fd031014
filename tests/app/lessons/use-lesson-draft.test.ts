import 'fake-indexeddb/auto'
import { mountSuspended } from '@nuxt/test-utils/runtime'
import { afterEach, beforeEach, expect, it, vi } from 'vitest'
import type { LessonDocument } from '#shared/contract/lesson-document'
import type { DraftView } from '#shared/contract/lessons'
import { useLessonDraft } from '~/composables/useLessonDraft'
import { openDevice } from '~/stores/outbox/device-database'

vi.mock('~/composables/useMe', () => ({ useMe: () => ({ me: { value: { id: 'hanne' } } }) }))

const text = (words: string): LessonDocument => ({ type: 'doc', content: [{ type: 'paragraph', content: [{ type: 'text', text: words }] }] })
const view = (revision: number, words: string, by = 'Hanne'): DraftView => ({ slug: 'bowl', number: 7, revision, title: 'The bowl', document: text(words), savedBy: by, savedAt: '2026-03-26T19:40:00Z', publishedVersion: 1 })

interface Save { seen: number, words: string, key: string }
/** The school's server, as far as a draft goes: it keeps one text and refuses a save over a revision that is not the newest. */
const server = { draft: view(3, 'as it was'), saves: [] as Save[], fails: null as null | { status: number, code: string }, loseAnswer: false, answered: new Map<string, DraftView>() }
const wordsOf = (document: LessonDocument) => document.content?.[0]?.content?.[0]?.text ?? ''

function answer(path: string, { method, body, headers }: { method?: string, body?: { seen: number, title: string, document: LessonDocument }, headers?: Record<string, string> }): DraftView {
  if (method !== 'POST' || !body) return server.draft
  const key = headers?.['idempotency-key'] ?? ''
  if (server.fails) throw Object.assign(new Error('no'), { status: server.fails.status, data: { code: server.fails.code, title: 'Said no.', issues: [{ path: 'content.0', message: 'No.' }] } })
  server.saves.push({ seen: body.seen, words: wordsOf(body.document), key })
  const before = server.answered.get(key)
  if (before) return before
  if (body.seen !== server.draft.revision) throw Object.assign(new Error('stale'), { status: 409, data: { code: 'draft_stale', title: 'Somebody else saved.', theirs: server.draft } })
  server.draft = { ...server.draft, revision: body.seen + 1, title: body.title, document: body.document, savedBy: 'Hanne' }
  server.answered.set(key, server.draft)
  if (server.loseAnswer) {
    server.loseAnswer = false
    throw new TypeError('network')
  }
  return server.draft
}

type Draft = ReturnType<typeof useLessonDraft>
const pages: { unmount: () => void }[] = []
/** The page as it is opened, or after a reload: nothing is left of the one before but what the browser keeps. */
async function opened(): Promise<Draft> {
  for (const page of pages.splice(0)) page.unmount()
  const held: { draft?: Draft } = {}
  pages.push(await mountSuspended({ setup: () => {
    held.draft = useLessonDraft('bowl')
    return () => null
  } }))
  const draft = held.draft as Draft
  await vi.waitFor(() => expect(draft.state.value).not.toBe('loading'))
  return draft
}
const keptWords = async () => (await (await openDevice()).getAll('drafts')).map(one => [one.key, wordsOf((one.value as { document: LessonDocument }).document)])
const reach = (draft: Draft, state: Draft['state']['value']) => vi.waitFor(() => expect(draft.state.value).toBe(state), { timeout: 4000 })

beforeEach(async () => {
  Object.assign(server, { draft: view(3, 'as it was'), saves: [], fails: null, loseAnswer: false, answered: new Map() })
  await (await openDevice()).clear('drafts')
  const call = async (path: string, options: never) => answer(path, options)
  vi.stubGlobal('$fetch', Object.assign(call, { raw: async (path: string, options: never) => ({ _data: answer(path, options), status: 200 }) }))
})
afterEach(() => {
  for (const page of pages.splice(0)) page.unmount()
  vi.unstubAllGlobals()
})

it('saves by itself after a pause, once for all that was typed, and says so', async () => {
  const draft = await opened()
  expect(draft.state.value).toBe('saved')
  for (const words of ['a', 'as', 'as it is now']) draft.change({ document: text(words) })
  expect(draft.state.value).toBe('typing')
  expect(server.saves).toEqual([])
  await reach(draft, 'saved')
  expect(server.saves.map(one => [one.seen, one.words])).toEqual([[3, 'as it is now']])
  expect(draft.draft.value?.revision).toBe(4)
  expect(await keptWords()).toEqual([])
})

it('sends at once when the page is left', async () => {
  const draft = await opened()
  draft.change({ document: text('left in a hurry') })
  await draft.save()
  expect(server.saves.map(one => one.words)).toEqual(['left in a hurry'])
})

it('saves what was typed while a save was on its way, over the new revision', async () => {
  const draft = await opened()
  draft.change({ document: text('first') })
  const first = draft.save()
  draft.change({ document: text('second') })
  await first
  await reach(draft, 'saved')
  expect(server.saves.map(one => [one.seen, one.words])).toEqual([[3, 'first'], [4, 'second']])
})

it('shows both texts when somebody else saved, and saves over neither unasked', async () => {
  const draft = await opened()
  server.draft = view(4, 'Marit wrote this', 'Marit')
  draft.change({ document: text('Hanne wrote this') })
  await reach(draft, 'stale')
  expect([draft.theirs.value?.savedBy, wordsOf(draft.theirs.value!.document), wordsOf(draft.text.value!.document)]).toEqual(['Marit', 'Marit wrote this', 'Hanne wrote this'])
  draft.change({ document: text('Hanne wrote this, and more') })
  await draft.save()
  expect(draft.state.value).toBe('stale')
  expect(wordsOf(server.draft.document)).toBe('Marit wrote this')

  await draft.keepMine()
  expect(draft.state.value).toBe('saved')
  expect(wordsOf(server.draft.document)).toBe('Hanne wrote this, and more')
  expect(server.saves.at(-1)?.seen).toBe(4)
})

it('takes theirs, and lays mine aside until it is thrown away', async () => {
  const draft = await opened()
  server.draft = view(4, 'Marit wrote this', 'Marit')
  draft.change({ document: text('Hanne wrote this') })
  await reach(draft, 'stale')
  const shown = draft.generation.value
  await draft.takeTheirs()
  expect([draft.state.value, wordsOf(draft.text.value!.document)]).toEqual(['saved', 'Marit wrote this'])
  // The editor is told to show another text than the one typed in it.
  expect(draft.generation.value).toBeGreaterThan(shown)
  expect(wordsOf(draft.aside.value!.document)).toBe('Hanne wrote this')

  const later = await opened()
  expect([later.state.value, wordsOf(later.aside.value!.document)]).toEqual(['saved', 'Hanne wrote this'])
  await later.throwAsideAway()
  expect((await opened()).aside.value).toBeNull()
})

it('keeps what the server cannot be told on this device, over a reload, and sends it when it can', async () => {
  const before = await opened()
  server.fails = { status: 0, code: '' }
  before.change({ title: 'The bowl, again', document: text('written in a steel shed') })
  await before.save()
  expect(before.state.value).toBe('kept-here')
  expect(await keptWords()).toEqual([['hanne:lesson:bowl', 'written in a steel shed']])

  server.fails = null
  const after = await opened()
  expect(after.restored.value).toBe(true)
  expect(wordsOf(after.text.value!.document)).toBe('written in a steel shed')
  await reach(after, 'saved')
  expect([server.draft.title, wordsOf(server.draft.document)]).toEqual(['The bowl, again', 'written in a steel shed'])
  expect(await keptWords()).toEqual([])
})

it('asks, after a reload, when somebody saved over what was kept here, and asks again after another', async () => {
  const before = await opened()
  server.fails = { status: 503, code: 'busy' }
  before.change({ document: text('kept here') })
  await before.save()
  server.fails = null
  server.draft = view(4, 'Marit wrote this', 'Marit')

  const after = await opened()
  expect(after.state.value).toBe('stale')
  after.change({ document: text('kept here, and more') })
  const again = await opened()
  expect([again.state.value, wordsOf(again.text.value!.document)]).toEqual(['stale', 'kept here, and more'])
  expect(wordsOf(server.draft.document)).toBe('Marit wrote this')
})

it('does not stand against itself when the answer to a save was lost', async () => {
  const draft = await opened()
  server.loseAnswer = true
  draft.change({ document: text('arrived, unanswered') })
  await draft.save()
  expect(draft.state.value).toBe('kept-here')
  draft.change({ document: text('arrived, unanswered, and more') })
  await reach(draft, 'saved')
  expect(draft.theirs.value).toBeNull()
  expect(wordsOf(server.draft.document)).toBe('arrived, unanswered, and more')
  // The same save under the same key, then the new one.
  expect(server.saves.map(one => one.seen)).toEqual([3, 3, 4])
  expect(server.saves[0]?.key).toBe(server.saves[1]?.key)
})

it('says why when the server refuses the text, and tries again only with another', async () => {
  const draft = await opened()
  server.fails = { status: 422, code: 'document_invalid' }
  draft.change({ document: text('not a lesson') })
  await draft.save()
  expect([draft.state.value, draft.failure.value?.code, draft.failure.value?.issues[0]?.path]).toEqual(['refused', 'document_invalid', 'content.0'])
  expect(await keptWords()).toHaveLength(1)
  server.fails = null
  draft.change({ document: text('a lesson') })
  await reach(draft, 'saved')
  expect(draft.failure.value).toBeNull()
})
