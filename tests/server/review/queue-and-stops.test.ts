import { afterAll, beforeEach, expect, it } from 'vitest'
import { AuditEvent } from '#server/db/entities/AuditEvent'
import { CohortStaff } from '#server/db/entities/CohortStaff'
import { Mail } from '#server/db/entities/Mail'
import { HeadStop, WitnessCall } from '#server/db/entities/PointRelease'
import { PracticeHead } from '#server/db/entities/PracticeHead'
import { User } from '#server/db/entities/User'
import { listFeedback } from '#server/services/feedback/list-feedback'
import { readFeedback } from '#server/services/feedback/read-feedback'
import { viewFeedback } from '#server/services/feedback/view-feedback'
import { decideReview } from '#server/services/review/decide-review'
import { liftStop } from '#server/services/review/lift-stop'
import { listReviewQueue } from '#server/services/review/list-review-queue'
import { seeWitness } from '#server/services/review/see-witness'
import { stopHead } from '#server/services/review/stop-head'
import { viewShopBoard } from '#server/services/review/view-shop-board'
import type { Actor } from '#server/utils/actor'
import { queueQuery, pageQuery } from '#shared/contract/views'
import { openHarness, type Harness } from '../harness'
import { makeSchool, review, type TestSchool } from './school'

let harness: Harness
let school: TestSchool
beforeEach(async () => {
  await harness?.close()
  harness = await openHarness()
  school = await makeSchool(harness)
})
afterAll(() => harness?.close())

const queue = (actor: Actor, query: Record<string, string | number> = {}) => listReviewQueue(school.em(), harness.app, actor, queueQuery.parse(query))
const minutesAgo = (minutes: number) => new Date(school.now().getTime() - minutes * 60_000)
const bowlOf = async (number: string, more: Partial<Parameters<TestSchool['scored']>[0]> = {}) => school.scored({ op: 70, part: 'first', point: 'hold-4', head: await school.anotherHead(number), ...more })

it('shows stops first, then the longest waiting, and only what was asked in cohorts taught', async () => {
  await bowlOf('DNK-0201', { askedAt: minutesAgo(5) })
  await bowlOf('DNK-0202', { askedAt: minutesAgo(50) })
  await bowlOf('DNK-0203', { askedAt: minutesAgo(1), changes: [{ criterion: 'W-06', state: 'reject' }, { criterion: 'W-01', state: 'borderline' }] })
  const { items, next } = await queue(school.hanne)
  expect(items.map(item => item.head.number)).toEqual(['DNK-0203', 'DNK-0202', 'DNK-0201'])
  expect(next).toBeNull()
  expect(items[0]).toMatchObject({ stopStands: true, point: { code: 'hold-4', name: 'Hold 4' }, cohort: 'Alder', youMaySign: true, states: { reject: 1, borderline: 1 } })
  expect(items[1]!.waitingMinutes).toBe(50)
  expect((await queue(school.stranger)).items).toEqual([])
  expect((await queue(school.imre)).items).toEqual([])
  expect((await queue(school.silas)).items.map(item => item.youMaySign)).toEqual([false, false, false])
})

it('counts a criterion once, with its worst result', async () => {
  await school.scored({ op: 70, point: 'hold-4', changes: [{ criterion: 'W-01', cylinder: 1, state: 'borderline' }, { criterion: 'W-01', cylinder: 2, side: 'intake', state: 'reject' }] })
  const [item] = (await queue(school.hanne)).items
  expect(item!.states).toMatchObject({ reject: 1, borderline: 0 })
})

it('leaves a stage without a point to the next point, unless a stop stands in it', async () => {
  await school.scored({ op: 90 })
  expect((await queue(school.hanne)).items).toEqual([])
  await school.scored({ op: 90, head: await school.anotherHead('DNK-0204'), changes: [{ criterion: 'G-01', state: 'borderline' }] })
  expect((await queue(school.hanne)).items).toMatchObject([{ head: { number: 'DNK-0204' }, point: null, youMaySign: false }])
})

it('pages without losing or repeating a line, also where times are equal', async () => {
  const at = minutesAgo(10)
  for (const n of [1, 2, 3, 4, 5]) await bowlOf(`DNK-030${n}`, { askedAt: n < 4 ? at : minutesAgo(n), changes: n === 5 ? [{ criterion: 'W-06', state: 'reject' }] : [] })
  const all = (await queue(school.hanne)).items.map(item => item.id)
  const paged: string[] = []
  let after: string | null = null
  do {
    const page: Awaited<ReturnType<typeof queue>> = await queue(school.hanne, { limit: 2, ...(after ? { after } : {}) })
    paged.push(...page.items.map(item => item.id))
    after = page.next
  } while (after)
  expect(paged).toEqual(all)
  expect(all).toHaveLength(5)
})

it.each(['rubbish', Buffer.from('["x"]').toString('base64url'), Buffer.from(`[true,"2026-01-01T00:00:00Z","not an id"]`).toString('base64url')])('refuses the page token %s', async (after) => {
  await bowlOf('DNK-0205')
  await expect(queue(school.hanne, { after })).rejects.toMatchObject({ code: 'page_unknown', status: 422 })
})

it('filters by cohort, by point, and by what the person may still sign', async () => {
  await bowlOf('DNK-0206')
  const flow = await school.scored({ op: 190, point: 'hold-8', head: await school.anotherHead('DNK-0207') })
  expect((await queue(school.hanne, { cohort: 'ALD-26' })).items).toHaveLength(2)
  expect((await queue(school.hanne, { cohort: 'CIN-26' })).items).toEqual([])
  expect((await queue(school.hanne, { point: 'hold-8' })).items).toMatchObject([{ id: flow.id }])
  expect((await queue(school.marit, { mine: 'true' })).items).toMatchObject([{ id: flow.id }])
  await school.em().nativeUpdate(PracticeHead, { number: 'DNK-0206' }, { student: school.hanne.id })
  expect((await queue(school.hanne, { mine: 'true' })).items).toMatchObject([{ id: flow.id }])
})

it('keeps Hold 8 in the queue between its two releases, but not for the person who gave the first', async () => {
  const head = await school.anotherHead('DNK-0208')
  for (const op of [140, 150, 160, 170]) await school.scored({ op, head, point: op === 160 ? 'witness-3' : op === 170 ? 'witness-5' : null })
  const { id } = await school.scored({ op: 190, point: 'hold-8', head })
  await decideReview(school.em(), harness.app, school.hanne, id, review({ decision: 'release', point: 'hold-8' }))
  expect((await queue(school.hanne, { mine: 'true', point: 'hold-8' })).items).toEqual([])
  expect((await queue(school.hanne, { point: 'hold-8' })).items).toMatchObject([{ id, youMaySign: false }])
  expect((await queue(school.marit, { mine: 'true', point: 'hold-8' })).items).toMatchObject([{ id, youMaySign: true }])
})

it('walks the partial index of what waits, however much was decided', async () => {
  const plan = await school.em().transactional(async (tx) => {
    await tx.getConnection().execute(`insert into submission (id, head_id, op, part, try_number, version, state, ports, note, started_by_id, created_at, asked_at, stop_stands)
      select gen_random_uuid(), ?, 70, 'rest', n, 1, 'decided', '[]', '', ?, now(), now() - n * interval '1 minute', false from generate_series(2, 30000) n`, [school.headId, school.imre.id], 'run', tx.getTransactionContext())
    await tx.getConnection().execute('analyze submission', [], 'run', tx.getTransactionContext())
    return tx.getConnection().execute<{ 'QUERY PLAN': string }[]>(`explain select s.id from submission s join practice_head h on h.id = s.head_id where s.state in ('asked', 'scored') and h.cohort_id = any('{${school.cohortId}}') and (s.point is not null or s.stop_stands)
      order by s.stop_stands desc, s.asked_at, s.id limit 26`, [], 'all', tx.getTransactionContext())
  })
  expect(plan.map(row => row['QUERY PLAN']).join('\n')).toContain('submission_waiting')
})

it('shows on the shop board who is held and for how long, stops first', async () => {
  await bowlOf('DNK-0209', { askedAt: minutesAgo(40) })
  const quiet = await school.anotherHead('DNK-0210')
  await stopHead(school.em(), harness.app, school.silas, quiet, { where: 'pushrod wall', reason: 'It sounds thin.' })
  const { items } = await viewShopBoard(school.em(), harness.app, school.hanne)
  expect(items.map(item => item.head.number)).toEqual(['DNK-0210', 'DNK-0209', 'DNK-0147'])
  expect(items[0]!.stops).toMatchObject([{ where: 'pushrod wall', by: 'Silas Okonray' }])
  expect(items[1]!.waiting).toMatchObject([{ point: { name: 'Hold 4' }, minutes: 40 }])
  expect((await viewShopBoard(school.em(), harness.app, school.stranger)).items).toEqual([])
  expect((await viewShopBoard(school.em(), harness.app, school.ingrid)).items).toHaveLength(3)
})

it('lets an instructor of the cohort and the safety officer stop a head, and nobody else', async () => {
  const stop = (actor: Actor) => stopHead(school.em(), harness.app, actor, school.headId, { where: 'bench 3', reason: 'No eye protection.' })
  for (const actor of [school.stranger, school.imre, school.corin]) await expect(stop(actor)).rejects.toMatchObject({ code: 'head_not_found', status: 404 })
  await stop(school.hanne)
  await stop(school.ingrid)
  const mails = await school.em().find(Mail, {}, { orderBy: { createdAt: 'asc' } })
  expect(mails.map(mail => mail.template)).toEqual(['stopped', 'stop-work'])
  expect(mails[1]!.text).toContain('Restart by Ingrid Tarnhow only.')
  expect(await school.em().count(AuditEvent, { action: 'head-stopped' })).toBe(2)
})

it('lifts a stop once, with a reason, by whoever may', async () => {
  const called = await stopHead(school.em(), harness.app, school.hanne, school.headId, { where: 'bowl', reason: 'Wait.' })
  const lift = (actor: Actor, id = called.id) => liftStop(school.em(), harness.app, actor, id, { reason: 'We have spoken.' })
  for (const actor of [school.stranger, school.imre, school.corin, school.ingrid]) await expect(lift(actor)).rejects.toMatchObject({ code: 'stop_not_found', status: 404 })
  const ends = await Promise.allSettled([lift(school.silas), lift(school.hanne)])
  expect(ends.map(end => end.status).sort()).toEqual(['fulfilled', 'rejected'])
  expect(ends.find(end => end.status === 'rejected')).toMatchObject({ reason: { code: 'stop_lifted', status: 409 } })
  expect(await school.em().findOneOrFail(HeadStop, called.id)).toMatchObject({ liftReason: 'We have spoken.' })

  const forSafety = await stopHead(school.em(), harness.app, school.ingrid, school.headId, { where: 'bench 3', reason: 'No guard.' })
  await expect(lift(school.hanne, forSafety.id)).rejects.toMatchObject({ code: 'stop_of_safety', status: 403 })
  await lift(school.ingrid, forSafety.id)

  const own = await stopHead(school.em(), harness.app, school.silas, school.headId, { where: 'bowl', reason: 'Wait.' })
  await school.em().nativeUpdate(PracticeHead, { id: school.headId }, { student: school.hanne.id })
  await expect(lift(school.hanne, own.id)).rejects.toMatchObject({ code: 'own_work' })
})

it('notes once that a witness point was seen, by somebody who may', async () => {
  const see = (actor: Actor, code = 'witness-1') => seeWitness(school.em(), harness.app, actor, school.headId, code)
  await expect(see(school.silas)).rejects.toMatchObject({ code: 'witness_not_told', status: 409 })
  await school.em().transactional(async (tx) => {
    tx.persist(tx.create(WitnessCall, { head: tx.getReference(PracticeHead, school.headId), point: 'witness-1', toldBy: tx.getReference(User, school.imre.id), toldAt: school.now(), waitUntil: school.now(), seenBy: null, seenAt: null }))
  })
  await expect(see(school.stranger)).rejects.toMatchObject({ code: 'head_not_found' })
  await expect(see(school.marit)).rejects.toMatchObject({ code: 'point_not_yours' })
  await expect(see(school.silas, 'hold-4')).rejects.toMatchObject({ code: 'point_not_due' })
  await expect(see(school.ingrid)).rejects.toMatchObject({ code: 'point_not_yours' })
  const first = await see(school.silas)
  await school.em().nativeUpdate(CohortStaff, { person: school.hanne.id }, { points: ['witness-1'] })
  expect(await see(school.hanne)).toEqual(first)
  expect(await school.em().find(WitnessCall, {})).toMatchObject([{ seenBy: { id: school.silas.id } }])
})

it('shows feedback to its student once decided, to instructors of the cohort, and to nobody else', async () => {
  const { id } = await school.scored({ op: 70, part: 'first', point: 'hold-4', changes: [{ criterion: 'W-01', state: 'borderline', text: 'Close.' }] })
  const photo = await school.photo(id)
  expect(await viewFeedback(school.em(), harness.app, school.imre, id)).toEqual([])
  await decideReview(school.em(), harness.app, school.hanne, id, review({ decision: 'send-back', feedback: 'Again at 12.', pins: [{ photoId: photo, x: 0.1, y: 0.9, criterion: 'W-01', text: 'here' }] }))

  const [own] = await viewFeedback(school.em(), harness.app, school.imre, id)
  expect(own).toMatchObject({ head: 'DNK-0147', pointName: 'Hold 4', decision: 'send-back', by: 'Hanne Brockwell', feedback: 'Again at 12.', readAt: null, pins: [{ number: 1, photoId: photo, x: 0.1, y: 0.9, criterion: 'W-01', text: 'here' }] })
  expect(own!.sentences.find(one => one.criterion === 'W-01')).toMatchObject({ state: 'borderline', text: 'Close.' })
  expect(await viewFeedback(school.em(), harness.app, school.marit, id)).toHaveLength(1)
  const nadia = await school.person('Nadia Quillfeather', ['student'])
  // An admin who teaches elsewhere sees heads, and no feedback.
  for (const actor of [nadia, school.stranger, school.corin, { ...school.stranger, roles: ['instructor', 'admin'] } as Actor]) {
    await expect(viewFeedback(school.em(), harness.app, actor, id)).rejects.toMatchObject({ code: 'submission_not_found', status: 404 })
  }
  await expect(readFeedback(school.em(), harness.app, school.hanne, id)).rejects.toMatchObject({ code: 'submission_not_found' })
  expect(await readFeedback(school.em(), harness.app, school.imre, id)).toEqual({ read: 1 })
  expect(await readFeedback(school.em(), harness.app, school.imre, id)).toEqual({ read: 0 })
})

it('lists a student\'s own feedback, newest first and page by page', async () => {
  const decided: string[] = []
  for (const tryNumber of [1, 2, 3]) {
    const { id } = await school.scored({ op: 70, part: 'first', point: 'hold-4', tryNumber })
    await decideReview(school.em(), harness.app, school.hanne, id, review({ decision: 'send-back', feedback: `Try ${tryNumber}.` }))
    decided.unshift(`Try ${tryNumber}.`)
  }
  const list = (actor: Actor, query: Record<string, string | number> = {}) => listFeedback(school.em(), actor, pageQuery.parse(query))
  const first = await list(school.imre, { limit: 2 })
  const second = await list(school.imre, { limit: 2, after: first.next! })
  expect([...first.items, ...second.items].map(item => item.feedback)).toEqual(decided)
  expect(second.next).toBeNull()
  expect((await list(school.hanne)).items).toEqual([])
  await expect(list(school.imre, { after: 'rubbish' })).rejects.toMatchObject({ code: 'page_unknown' })
})

it('keeps the words of a first release of two from the student until it is decided', async () => {
  const { id } = await school.scored({ op: 190, point: 'hold-8' })
  for (const op of [140, 150, 160, 170]) await school.scored({ op, point: op === 160 ? 'witness-3' : op === 170 ? 'witness-5' : null })
  await decideReview(school.em(), harness.app, school.hanne, id, review({ decision: 'release', point: 'hold-8', feedback: 'For Marit.' }))
  expect(await viewFeedback(school.em(), harness.app, school.imre, id)).toEqual([])
  expect((await listFeedback(school.em(), school.imre, pageQuery.parse({}))).items).toEqual([])
  expect(await viewFeedback(school.em(), harness.app, school.marit, id)).toHaveLength(1)
})
