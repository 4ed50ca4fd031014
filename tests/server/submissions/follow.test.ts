import { afterAll, beforeAll, beforeEach, expect, it } from 'vitest'
import { Session } from '#server/db/entities/Session'
import { User } from '#server/db/entities/User'
import { followSubmission, type Followed } from '#server/services/submissions/follow-submission'
import { scoreSubmission } from '#server/services/submissions/score-submission'
import { openHarness, type Harness } from '../harness'
import { serveApi, type Api, type Caller } from '../http'
import { makeSchool, type TestSchool } from '../review/school'
import { clearFor, read, walkTo } from '../walk'

let harness: Harness, api: Api, school: TestSchool, imre: Caller, id: string
let heads = 500
beforeAll(async () => {
  harness = await openHarness()
  api = await serveApi(harness)
  school = await makeSchool(harness)
  await clearFor(school, school.imre)
})
afterAll(async () => {
  await api?.close()
  await harness?.close()
})
beforeEach(async () => {
  imre = await api.as(school.imre)
  heads += 1
  const headId = await school.anotherHead(`DNK-0${heads}`)
  await walkTo(school, 70, headId)
  id = (await imre.post<{ id: string }>(`/api/heads/${headId}/stages/70/submissions`)).body.id
})

interface Stream { status: number, type: string, next: (event?: string) => Promise<{ id: string, event: string, data: string } | null>, stop: () => void }

/** Reads a stream event by event, as a browser does; null when the server ended it. */
async function open(who: Caller, lastSeen?: string): Promise<Stream> {
  const stop = new AbortController()
  const answer = await fetch(`${api.url}/api/submissions/${id}/events`, { headers: { cookie: who.cookie, ...(lastSeen ? { 'last-event-id': lastSeen } : {}) }, signal: stop.signal })
  const reader = answer.body!.pipeThrough(new TextDecoderStream()).getReader()
  let text = ''
  async function one(): Promise<{ id: string, event: string, data: string } | null> {
    while (!text.includes('\n\n')) {
      const { done, value } = await reader.read()
      if (done) return null
      text += value
    }
    const [block = '', ...rest] = text.split('\n\n')
    text = rest.join('\n\n')
    const field = (name: string) => block.split('\n').find(line => line.startsWith(`${name}: `))?.slice(name.length + 2) ?? ''
    if (field('event') === 'beat') return one()
    return { id: field('id'), event: field('event'), data: field('data') }
  }
  return { status: answer.status, type: answer.headers.get('content-type') ?? '', next: one, stop: () => stop.abort() }
}
const state = (message: { data: string } | null) => message === null ? null : (JSON.parse(message.data) as { state: string, version: number }).state

it('tells the state at once, then whenever it changes, each with an id', async () => {
  const stream = await open(imre)
  expect(stream).toMatchObject({ status: 200, type: expect.stringContaining('text/event-stream') })
  const first = await stream.next()
  expect(first).toMatchObject({ id: '1.0.draft', event: 'submission' })
  await imre.post(`/api/submissions/${id}/ask`)
  expect(state(await stream.next())).toBe('asked')
  await scoreSubmission(harness.app, id)
  expect(await stream.next()).toMatchObject({ id: '1.1.scored' })
  await read(harness, school, id, { quantity: 'seat-land', values: [1.6], cylinder: 1, side: 'intake', spot: '12' })
  expect(await stream.next()).toMatchObject({ id: '2.1.asked' })
  stream.stop()
})

it('tells a page that comes back only what it missed', async () => {
  const same = await open(imre, '1.0.draft')
  await imre.post(`/api/submissions/${id}/ask`)
  expect(await same.next()).toMatchObject({ id: '1.0.asked' })
  same.stop()
  const behind = await open(imre, '1.0.draft')
  expect(await behind.next()).toMatchObject({ id: '1.0.asked' })
  behind.stop()
})

it('gives a person four streams and no fifth, until one ends', async () => {
  const four = await Promise.all([1, 2, 3, 4].map(() => open(imre)))
  for (const one of four) await one.next()
  expect(await imre.get(`/api/submissions/${id}/events`)).toMatchObject({ status: 429, body: { code: 'too_many_streams' } })
  const hanne = await open(await api.as(school.hanne))
  expect(hanne.status).toBe(200)
  four[0]!.stop()
  await expect.poll(async () => {
    const again = await open(imre)
    again.stop()
    return again.status
  }, { timeout: 3000 }).toBe(200)
  for (const one of [...four, hanne]) one.stop()
})

it('ends at the next word when the session was ended, and says nothing more', async () => {
  const stream = await open(imre)
  await stream.next()
  await school.em().nativeUpdate(Session, { id: imre.sessionId }, { endedAt: new Date() })
  const hanne = await api.as(school.hanne)
  await hanne.post(`/api/submissions/${id}/ask`)
  expect(await stream.next()).toBeNull()
})

/** The same without a connection, looking as often as a test can wait for. */
async function follow(checkEveryMs: number) {
  const told: Followed[] = []
  const ended = new Promise<void>((end) => {
    void harness.app.orm.em.fork().findOneOrFail(Session, imre.sessionId).then(() => followSubmission({
      app: harness.app, actor: { ...school.imre, sessionId: imre.sessionId }, submissionId: id, lastSeen: null, checkEveryMs, beatEveryMs: 20,
      push: async message => void told.push(message), end,
    }))
  })
  await expect.poll(() => told.length).toBeGreaterThan(1)
  return { told, ended }
}

it('ends by itself when the role is taken away, though nothing changes, and beats until then', async () => {
  const { told, ended } = await follow(40)
  expect(told.filter(one => one.event === 'submission')).toHaveLength(1)
  await school.em().nativeUpdate(User, { id: school.imre.id }, { roles: ['safety'] })
  try {
    await ended
  }
  finally {
    await school.em().nativeUpdate(User, { id: school.imre.id }, { roles: ['student'] })
  }
  const count = told.length
  await new Promise(done => setTimeout(done, 100))
  expect(told).toHaveLength(count)
})
