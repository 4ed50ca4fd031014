import { afterAll, beforeAll, expect, it } from 'vitest'
import { PracticeHead } from '#server/db/entities/PracticeHead'
import { decideReview } from '#server/services/review/decide-review'
import { viewReviewSheet } from '#server/services/review/view-review-sheet'
import type { Actor } from '#server/utils/actor'
import { openHarness, type Harness } from '../harness'
import { makeSchool, review, type TestSchool } from './school'

let harness: Harness
let school: TestSchool
beforeAll(async () => {
  harness = await openHarness()
  school = await makeSchool(harness)
})
afterAll(() => harness?.close())

let count = 0
const anotherHead = () => school.anotherHead(`DNK-05${String(++count).padStart(2, '0')}`)
const sheet = (actor: Actor, id: string) => viewReviewSheet(school.em(), harness.app, actor, id)

it('gathers the criteria the point needs over all stages, stops first, with the submissions decided together', async () => {
  const head = await anotherHead()
  await school.scored({ op: 60, head })
  const bowl = await school.scored({ op: 70, head, changes: [{ criterion: 'W-06', cylinder: 2, side: 'intake', state: 'borderline', at: '12-6' }] })
  await school.scored({ op: 90, head })
  const { id } = await school.scored({ op: 100, point: 'hold-5', head, changes: [{ criterion: 'FB-01', state: 'not-assessed' }] })
  const photo = await school.photo(bowl.id)
  const view = await sheet(school.marit, id)
  // Handbook 3.4: Hold 5 needs C, W, G and FB.
  expect([...new Set(view.criteria.map(one => one.stage.code))].sort()).toEqual(['C', 'FB', 'G', 'W'])
  const lastStop = view.criteria.map(one => one.stop).lastIndexOf(true)
  expect(view.criteria.slice(0, lastStop + 1).every(one => one.stop)).toBe(true)
  expect(view.others.map(one => one.op)).toEqual([60, 70, 90])
  expect(view.submission.photos.map(one => one.id)).toContain(photo)
  expect(view.release).toMatchObject({ allowed: false, refused: [], conditions: ['no more cutting at 12-6, cylinder 2 intake'] })
  expect([...new Set(view.release.needReason.map(one => one.criterion))]).toEqual(['FB-01'])
  expect(view.maySign).toEqual({ may: true, why: null })
  expect(view.proposedFeedback).toMatch(/^Imre, \d+ of \d+ accepted\. Look at .+\. Still to be shown: .+\.$/)
})

it('tells the second person who signed before, and the first that it waits', async () => {
  const head = await anotherHead()
  for (const op of [140, 150, 160, 170]) await school.scored({ op, head, point: op === 160 ? 'witness-3' : op === 170 ? 'witness-5' : null })
  const { id } = await school.scored({ op: 190, point: 'hold-8', head })
  await decideReview(school.em(), harness.app, school.hanne, id, review({ decision: 'release', point: 'hold-8' }))
  const forHanne = await sheet(school.hanne, id)
  expect(forHanne.maySign).toMatchObject({ may: false, why: expect.stringContaining('another person') })
  const forMarit = await sheet(school.marit, id)
  expect(forMarit.maySign.may).toBe(true)
  expect(forMarit.signedBefore).toMatchObject([{ by: 'Hanne Brockwell' }])
  expect(forMarit.reviews).toMatchObject([{ by: 'Hanne Brockwell', decision: 'release' }])
})

it('says why a person may not sign', async () => {
  const head = await anotherHead()
  const { id } = await school.scored({ op: 70, part: 'first', point: 'hold-4', head })
  expect((await sheet(school.silas, id)).maySign).toMatchObject({ may: false, why: expect.stringContaining('Hold 4') })
  await school.moveOn(id, null)
  expect((await sheet(school.hanne, id)).maySign).toMatchObject({ may: false, why: expect.stringContaining('scored') })
  await school.em().nativeUpdate(PracticeHead, { id: head }, { student: school.hanne.id })
  expect((await sheet(school.hanne, id)).maySign).toMatchObject({ may: false, why: expect.stringContaining('own work') })
  const pointless = await school.scored({ op: 90, head: await anotherHead() })
  expect((await sheet(school.hanne, pointless.id)).maySign.may).toBe(false)
})

it('holds the first try beside the second, with what was said of it', async () => {
  const head = await anotherHead()
  const first = await school.scored({ op: 70, part: 'first', point: 'hold-4', head, changes: [{ criterion: 'W-01', state: 'reject' }] })
  await decideReview(school.em(), harness.app, school.hanne, first.id, review({ decision: 'send-back', feedback: 'Again.', overrides: [{ criterion: 'W-02', state: 'borderline', reason: 'Uneven to the eye.' }] }))
  const { id } = await school.scored({ op: 70, part: 'first', point: 'hold-4', tryNumber: 2, head })
  const view = await sheet(school.hanne, id)
  expect(view.submission.firstTry).toMatchObject({ id: first.id })
  const before = view.submission.firstTry!.criteria
  expect(before.find(one => one.id === 'W-01')).toMatchObject({ state: 'reject', machineState: 'reject' })
  expect(before.find(one => one.id === 'W-02')).toMatchObject({ state: 'borderline', machineState: 'accept', results: [{ state: 'accept', override: { state: 'borderline', reason: 'Uneven to the eye.', by: 'Hanne Brockwell' } }] })
  expect(view.criteria.find(one => one.id === 'W-01')).toMatchObject({ state: 'accept' })
  expect(view.reviews).toMatchObject([{ try: 1, decision: 'send-back', feedback: 'Again.' }])
})

it.each([['another cohort\'s instructor', 'stranger'], ['the student', 'imre'], ['the office', 'corin'], ['safety', 'ingrid']] as const)('is not found by %s', async (_, who) => {
  const { id } = await school.scored({ op: 70, part: 'first', point: 'hold-4', head: await anotherHead() })
  await expect(sheet(school[who], id)).rejects.toMatchObject({ code: 'submission_not_found', status: 404 })
})
