import 'fake-indexeddb/auto'
import { createPinia, setActivePinia } from 'pinia'
import { afterEach, beforeEach, expect, it, vi } from 'vitest'
import { openDevice } from '~/stores/outbox/device-database'
import { useOutbox } from '~/stores/outbox/outbox'

const submission = '11111111-1111-4111-8111-111111111111'
const reading = (value: string) => ({ quantity: 'seat-land', cylinder: 1, side: 'intake' as const, at: { spot: '12' }, values: [value], unit: 'mm', instrument: 'loupe' })

interface Sent { path: string, values: string[], key: string }
/** What reached the server, and what it says: nothing at all (0), a refusal by its status, or yes. */
const server = { says: 0, sent: [] as Sent[] }

/** The page as it is after a reload: nothing of it is left but what the browser keeps. */
function reloaded() {
  setActivePinia(createPinia())
  return useOutbox()
}
const kept = async () => (await (await openDevice()).getAll('outbox')).map(item => [item.person, item.kind === 'reading' ? item.input.values[0] : item.kind])

beforeEach(async () => {
  server.says = 0
  server.sent = []
  await (await openDevice()).clear('outbox')
  vi.stubGlobal('$fetch', async (path: string, { body, headers }: { body: { values: string[] }, headers: Record<string, string> }) => {
    if (server.says !== 200) throw server.says === 0 ? new TypeError('network') : Object.assign(new Error('refused'), { status: server.says, data: { code: 'said', title: 'Said no.' } })
    server.sent.push({ path, values: body.values, key: headers['idempotency-key'] ?? '' })
    return {}
  })
})
afterEach(() => vi.unstubAllGlobals())

it('keeps the things of two students apart on one tablet, and sends each only for whom they are', async () => {
  const first = reloaded()
  await first.open('imre')
  await first.addReading(submission, reading('1.61'))
  await vi.waitFor(() => expect(first.online).toBe(false))

  server.says = 200
  const second = reloaded()
  await second.open('bettany')
  expect(second.items).toEqual([])
  await second.addReading(submission, reading('1.70'))
  await vi.waitFor(() => expect(server.sent.map(one => one.values)).toEqual([['1.70']]))
  await vi.waitFor(async () => expect(await kept()).toEqual([['imre', '1.61']]))

  await reloaded().open('imre')
  await vi.waitFor(() => expect(server.sent.map(one => one.values)).toEqual([['1.70'], ['1.61']]))
  await vi.waitFor(async () => expect(await kept()).toEqual([]))
})

it('loses nothing of a full queue when the session ends, and sends it once, in order, after signing in again', async () => {
  server.says = 401
  const before = reloaded()
  await before.open('imre')
  for (const value of ['1.61', '1.62', '1.63']) await before.addReading(submission, reading(value))
  await vi.waitFor(() => expect(before.signInNeeded).toBe(true))
  expect(before.items.map(item => item.state)).toEqual(['waiting', 'waiting', 'waiting'])
  const keys = before.items.map(item => item.id)

  server.says = 200
  const after = reloaded()
  await after.open('imre')
  expect(after.signInNeeded).toBe(false)
  await vi.waitFor(async () => expect(await kept()).toEqual([]))
  expect(server.sent).toEqual(['1.61', '1.62', '1.63'].map((value, index) => ({ path: `/api/submissions/${submission}/readings`, values: [value], key: keys[index] })))
})

it('keeps what the server refuses, with why, and goes on with the rest', async () => {
  server.says = 422
  const outbox = reloaded()
  await outbox.open('imre')
  await outbox.addReading(submission, reading('41'))
  await vi.waitFor(() => expect(outbox.items.map(item => [item.state, item.problem?.code])).toEqual([['refused', 'said']]))
  server.says = 200
  await outbox.addReading(submission, reading('1.64'))
  await vi.waitFor(() => expect(server.sent.map(one => one.values)).toEqual([['1.64']]))
  await vi.waitFor(async () => expect(await kept()).toEqual([['imre', '41']]))
})
