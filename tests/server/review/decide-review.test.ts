import { afterAll, beforeEach, expect, it } from 'vitest'
import { AuditEvent } from '#server/db/entities/AuditEvent'
import { CohortStaff } from '#server/db/entities/CohortStaff'
import { Mail } from '#server/db/entities/Mail'
import { Photo } from '#server/db/entities/Photo'
import { HeadStop, PointRelease, WitnessCall } from '#server/db/entities/PointRelease'
import { Override, PhotoPin, Review } from '#server/db/entities/Review'
import { PracticeHead } from '#server/db/entities/PracticeHead'
import { Submission } from '#server/db/entities/Submission'
import { User } from '#server/db/entities/User'
import { handlers } from '../../../server/jobs/handlers'
import { sealAudit } from '#server/services/audit/seal-audit'
import { verifyAudit } from '#server/services/audit/verify-audit'
import { decideReview } from '#server/services/review/decide-review'
import type { Actor } from '#server/utils/actor'
import type { ReviewInput } from '#shared/contract/inputs'
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

const decide = (actor: Actor, id: string, input: Partial<ReviewInput> & Pick<ReviewInput, 'decision'>) => decideReview(school.em(), harness.app, actor, id, review(input))
const release = (actor: Actor, id: string, point: string, more: Partial<ReviewInput> = {}) => decide(actor, id, { decision: 'release', point, ...more })
const bowl = (changes: Parameters<TestSchool['scored']>[0]['changes'] = []) => school.scored({ op: 70, part: 'first', point: 'hold-4', changes })
const nothingWasKept = async () => {
  expect(await school.em().count(Review)).toBe(0)
  expect(await school.em().count(PointRelease)).toBe(0)
  expect(await school.em().count(Mail)).toBe(0)
  expect(await school.em().count(AuditEvent)).toBe(0)
}

it('releases a point whose criteria are all accepted: release, decision, message, audit event and seal in one go', async () => {
  const { id } = await bowl()
  const photo = await school.photo(id)
  const answer = await release(school.hanne, id, 'hold-4', { feedback: 'Clean work.', pins: [{ photoId: photo, x: 0.25, y: 0.5, criterion: 'W-01', text: 'here' }] })
  expect(answer).toMatchObject({ decision: 'release', point: 'hold-4', complete: true, conditions: [], submission: { state: 'decided', word: 'Sound' } })

  const em = school.em()
  expect(await em.findOneOrFail(Submission, id)).toMatchObject({ state: 'decided', decision: 'release' })
  const [given] = await em.find(PointRelease, {}, { populate: ['restsOn'] })
  expect(given).toMatchObject({ point: 'hold-4', by: { id: school.hanne.id }, restsOn: [{ submission: id, version: 1, rubric: 1 }] })
  expect(await em.findOneOrFail(Photo, photo)).toMatchObject({ state: 'reviewed' })
  expect(await em.find(PhotoPin, {})).toMatchObject([{ number: 1, x: 0.25, y: 0.5, criterion: 'W-01' }])
  const [mail] = await em.find(Mail, {})
  expect(mail).toMatchObject({ template: 'hold-released', to: 'imre@sallowbeck.example', subject: 'Hold 4: released - you may go on' })
  expect(mail!.text).toContain('The other bowls, as the first')
  expect(mail!.text).toContain('Clean work.')
  const [event] = await em.find(AuditEvent, { action: 'review-release' })
  expect(event).toMatchObject({ actor: school.hanne.id, subject: `submission:${id}` })
  // Ids and codes alone: names and e-mails outlive nobody here.
  expect(event!.detail).not.toMatch(/Imre|Hanne|@/)

  const jobs = await em.getConnection().execute<{ name: string, data: { reason?: string, mailId?: string } }[]>(`select name, data from pgboss.job where state = 'created' order by name`)
  expect(jobs.map(job => job.name)).toEqual(['seal-audit', 'send-mail'])
  for (const job of jobs) await (handlers[job.name as 'send-mail'])(harness.app, job.data as { mailId: string })
  expect(await verifyAudit(school.em(), new Date())).toMatchObject({ links: 1, seals: 1, problems: [] })
  expect(harness.mail.inbox.list({ to: 'imre@sallowbeck.example' })).toHaveLength(1)
})

it('refuses a borderline must without a reason and lists it; takes it with one', async () => {
  const { id } = await bowl([{ criterion: 'W-01', state: 'borderline', value: 1.56, expandedUncertainty: 0.08 }])
  await expect(release(school.hanne, id, 'hold-4')).rejects.toMatchObject({ code: 'release_forbidden', status: 409, extra: { refused: [{ criterion: 'W-01', cylinder: 1, side: 'intake', state: 'borderline' }], needReason: [{ criterion: 'W-01' }] } })
  await nothingWasKept()
  const answer = await release(school.hanne, id, 'hold-4', { reasons: [{ criterion: 'W-01', cylinder: 1, side: 'intake', reason: 'Turned on the gauge block: 1.60.' }] })
  expect(answer.complete).toBe(true)
  expect(await school.em().find(Review, {})).toMatchObject([{ reasons: [{ criterion: 'W-01', reason: 'Turned on the gauge block: 1.60.' }] }])
})

it('does not take a reason given for another criterion', async () => {
  const { id } = await bowl([{ criterion: 'W-01', state: 'borderline' }])
  await expect(release(school.hanne, id, 'hold-4', { reasons: [{ criterion: 'W-03i', reason: 'fine' }] })).rejects.toMatchObject({ code: 'release_forbidden' })
})

it('cannot release a rejected stop, neither with a reason nor with an override', async () => {
  const { id } = await bowl([{ criterion: 'W-06', state: 'reject', value: 2.9, expandedUncertainty: 0.15, at: '12-6' }])
  const reasons = [{ criterion: 'W-06', reason: 'It looks thick enough.' }]
  await expect(release(school.hanne, id, 'hold-4', { reasons })).rejects.toMatchObject({ code: 'release_forbidden', extra: { refused: [{ criterion: 'W-06', state: 'reject', at: '12-6' }] } })
  for (const state of ['borderline', 'accept'] as const) {
    await expect(release(school.hanne, id, 'hold-4', { reasons, overrides: [{ criterion: 'W-06', state, reason: 'It looks thick enough.' }] })).rejects.toMatchObject({ code: 'override_not_allowed', status: 422 })
  }
  await nothingWasKept()
})

it('releases a borderline stop only with the condition the program adds', async () => {
  const { id } = await bowl([{ criterion: 'W-06', state: 'borderline', value: 3.6, expandedUncertainty: 0.15, at: '12-6' }])
  const answer = await release(school.hanne, id, 'hold-4', { condition: 'Show me the wall before the exhaust.' })
  expect(answer.conditions).toEqual([expect.stringContaining('no more cutting at 12-6')])
  const [given] = await school.em().find(PointRelease, {})
  expect(given).toMatchObject({ condition: 'Show me the wall before the exhaust.', conditions: [{ criterion: 'W-06', at: '12-6' }] })
  const [mail] = await school.em().find(Mail, {})
  expect(mail!.text).toContain('no more cutting at 12-6')
  expect(mail!.text).toContain('Show me the wall before the exhaust.')
})

it('does not let an override to accept swallow the condition of a borderline stop', async () => {
  const { id } = await bowl([{ criterion: 'W-06', state: 'borderline' }])
  await expect(release(school.hanne, id, 'hold-4', { overrides: [{ criterion: 'W-06', state: 'accept', reason: 'Sure.' }] })).rejects.toMatchObject({ code: 'override_not_allowed' })
})

it('cannot release where evidence was left out of a stop, and needs a reason where it was left out of a must', async () => {
  const { id } = await bowl([{ criterion: 'W-06', state: 'not-assessed' }, { criterion: 'W-01', state: 'not-assessed' }])
  const reasons = [{ criterion: 'W-06', reason: 'I measured it myself.' }, { criterion: 'W-01', reason: 'I measured it myself.' }]
  await expect(release(school.hanne, id, 'hold-4', { reasons })).rejects.toMatchObject({ code: 'release_forbidden', extra: { refused: [{ criterion: 'W-06', state: 'not-assessed' }] } })
  await expect(release(school.hanne, id, 'hold-4', { reasons, overrides: [{ criterion: 'W-01', state: 'accept', reason: 'seen' }] })).rejects.toMatchObject({ code: 'override_not_allowed' })
})

it('treats a criterion that nobody scored at all as evidence left out', async () => {
  const { id } = await bowl()
  await school.em().getConnection().execute(`delete from criterion_result where criterion = 'W-06'`)
  await expect(release(school.hanne, id, 'hold-4')).rejects.toMatchObject({ code: 'release_forbidden', extra: { refused: [{ criterion: 'W-06', cylinder: 1, side: 'intake', state: 'not-assessed' }] } })
})

it('lets the instructor give what is judged, and moves what is measured one step with a reason', async () => {
  const { id } = await bowl([{ criterion: 'W-08', state: 'not-assessed' }, { criterion: 'W-01', state: 'borderline', value: 1.56, text: 'Down to 1.56 mm.' }])
  await release(school.hanne, id, 'hold-4', { overrides: [{ criterion: 'W-08', state: 'accept', reason: 'I stood beside him.' }, { criterion: 'W-01', cylinder: 1, side: 'intake', state: 'accept', reason: 'Comparator says 1.62.' }] })
  const overrides = await school.em().find(Override, {}, { populate: ['result'] })
  expect(overrides.map(one => [one.result.$.criterion, one.result.$.state, one.state]).sort()).toEqual([['W-01', 'borderline', 'accept'], ['W-08', 'not-assessed', 'accept']])
  const [kept] = await school.em().find(Review, {})
  const said = kept!.sentences.find(one => one.criterion === 'W-01')
  // The program's own sentence would contradict the person's state; the reason stands with it.
  expect(said).toMatchObject({ state: 'accept', edited: false })
  expect(said!.text).not.toBe('Down to 1.56 mm.')
  expect(said!.text).toContain('Comparator says 1.62.')
})

it.each([
  ['two steps', { criterion: 'W-01', state: 'reject' as const, reason: 'x' }, 'override_not_allowed'],
  ['to what it is already', { criterion: 'W-01', state: 'accept' as const, reason: 'x' }, 'override_not_allowed'],
  ['of a criterion of another stage', { criterion: 'FB-01', state: 'borderline' as const, reason: 'x' }, 'override_outside'],
  ['of a criterion nobody knows', { criterion: 'ZZ-99', state: 'borderline' as const, reason: 'x' }, 'override_outside'],
  ['at a port the part does not cover', { criterion: 'W-01', cylinder: 3, state: 'borderline' as const, reason: 'x' }, 'override_outside'],
])('refuses an override %s', async (_, override, code) => {
  const { id } = await bowl()
  await expect(release(school.hanne, id, 'hold-4', { overrides: [override] })).rejects.toMatchObject({ code, status: 422 })
  await nothingWasKept()
})

it('refuses one result overridden twice in one review', async () => {
  const { id } = await bowl()
  const overrides = [{ criterion: 'W-01', state: 'borderline' as const, reason: 'a' }, { criterion: 'W-01', cylinder: 1, state: 'borderline' as const, reason: 'b' }]
  await expect(decide(school.hanne, id, { decision: 'send-back', overrides })).rejects.toMatchObject({ code: 'override_not_allowed' })
})

it('refuses a pin on a photo of another submission, on one set aside, or tied to a criterion of another stage', async () => {
  const { id } = await bowl()
  const other = await school.scored({ op: 90, head: await school.anotherHead('DNK-0200') })
  const own = await school.photo(id)
  const foreign = await school.photo(other.id)
  const aside = await school.photo(id, { setAsideAt: new Date() })
  for (const pin of [{ photoId: foreign, criterion: 'W-01' }, { photoId: aside, criterion: 'W-01' }, { photoId: crypto.randomUUID(), criterion: 'W-01' }, { photoId: own, criterion: 'FB-01' }]) {
    await expect(release(school.hanne, id, 'hold-4', { pins: [{ x: 0.5, y: 0.5, text: '', ...pin }] })).rejects.toMatchObject({ code: 'pin_outside', status: 422 })
  }
  await nothingWasKept()
})

it('refuses a stale review and says what is new', async () => {
  const { id } = await bowl()
  const photo = await school.photo(id)
  const version = await school.moveOn(id)
  await expect(release(school.hanne, id, 'hold-4')).rejects.toMatchObject({ code: 'review_stale', status: 409, extra: { version: 2, changed: ['the photo Seat close-up'] } })
  await release(school.hanne, id, 'hold-4', { seen: version })
  expect(photo).toBeTruthy()
})

it('refuses to decide what is not scored at its version yet', async () => {
  const { id } = await bowl()
  const version = await school.moveOn(id, null)
  await expect(release(school.hanne, id, 'hold-4', { seen: version })).rejects.toMatchObject({ code: 'submission_not_scored', status: 409 })
})

it('decides once: of two reviews at the same moment one is told it is decided', async () => {
  const { id } = await bowl()
  const ends = await Promise.allSettled([release(school.hanne, id, 'hold-4'), decide(school.hanne, id, { decision: 'send-back' })])
  expect(ends.map(end => end.status).sort()).toEqual(['fulfilled', 'rejected'])
  expect(ends.find(end => end.status === 'rejected')).toMatchObject({ reason: { code: 'submission_decided', status: 409 } })
  expect(await school.em().count(Review)).toBe(1)
  expect(await school.em().count(Mail)).toBe(1)
})

it('refuses own work, whatever the person may sign', async () => {
  const { id } = await bowl()
  await school.em().nativeUpdate(PracticeHead, { id: school.headId }, { student: school.hanne.id })
  await expect(release(school.hanne, id, 'hold-4')).rejects.toMatchObject({ code: 'own_work', status: 403 })
  await expect(decide(school.hanne, id, { decision: 'stop', feedback: 'stop' })).rejects.toMatchObject({ code: 'own_work' })
})

it('hides another cohort\'s submission, also once the person no longer teaches it or is no instructor any more', async () => {
  const { id } = await bowl()
  await expect(release(school.stranger, id, 'hold-4')).rejects.toMatchObject({ code: 'submission_not_found', status: 404 })
  await expect(release({ ...school.hanne, roles: ['student'] }, id, 'hold-4')).rejects.toMatchObject({ code: 'submission_not_found' })
  await expect(release(school.corin, id, 'hold-4')).rejects.toMatchObject({ code: 'submission_not_found' })
  await school.em().nativeUpdate(CohortStaff, { person: school.hanne.id }, { until: new Date(school.now().getTime() - 1000) })
  await expect(release(school.hanne, id, 'hold-4')).rejects.toMatchObject({ code: 'submission_not_found' })
})

it('keeps the point to those who may sign it, but lets anybody who teaches the cohort stop', async () => {
  const { id } = await bowl()
  await expect(release(school.silas, id, 'hold-4')).rejects.toMatchObject({ code: 'point_not_yours', status: 403 })
  await expect(decide(school.silas, id, { decision: 'send-back' })).rejects.toMatchObject({ code: 'point_not_yours' })
  await expect(decide(school.silas, id, { decision: 'stop', feedback: 'The bur is blue. Stop.' })).resolves.toMatchObject({ decision: 'stop' })
})

it('refuses a point the submission does not fall on', async () => {
  const { id } = await bowl()
  await expect(release(school.hanne, id, 'hold-5')).rejects.toMatchObject({ code: 'point_not_due', status: 422 })
  await expect(decide(school.hanne, id, { decision: 'release' })).rejects.toMatchObject({ code: 'point_not_due' })
  const pointless = await school.scored({ op: 90 })
  await expect(decide(school.hanne, pointless.id, { decision: 'release' })).rejects.toMatchObject({ code: 'point_not_due' })
})

it('does not let whoever entered a must\'s reading for the student release on it', async () => {
  const { id } = await bowl()
  await school.em().getConnection().execute(`insert into instrument (id, code, name, quantities, expanded_u, unit, created_at) values (gen_random_uuid(), 'loupe', 'Loupe', '{seat-land}', 0.08, 'mm', now())`)
  await school.em().getConnection().execute(`insert into reading (id, submission_id, quantity, cylinder, side, as_typed, unit, "values", base_unit, instrument_id, expanded_u, added_by_id, taken_at, recorded_at)
    select gen_random_uuid(), ?, 'seat-land', 1, 'intake', '{1.60}', 'mm', '{1.6}', 'mm', id, 0.08, ?, now(), now() from instrument`, [id, school.hanne.id])
  await expect(release(school.hanne, id, 'hold-4')).rejects.toMatchObject({ code: 'release_forbidden', extra: { refused: [{ criterion: 'W-01', why: expect.stringContaining('somebody else') }] } })
})

it('takes two different people for Hold 8, and not the same one twice', async () => {
  for (const op of [140, 150, 160, 170]) await school.scored({ op, point: op === 160 ? 'witness-3' : op === 170 ? 'witness-5' : null })
  await school.scored({ op: 170, part: 'first', point: 'witness-4' })
  const { id } = await school.scored({ op: 190, point: 'hold-8' })
  const first = await release(school.hanne, id, 'hold-8')
  expect(first).toMatchObject({ complete: false, submission: { state: 'scored' } })
  expect(await school.em().count(Mail)).toBe(0)
  await expect(release(school.hanne, id, 'hold-8')).rejects.toMatchObject({ code: 'release_forbidden', extra: { refused: [{ why: expect.stringContaining('another person') }] } })
  const second = await release(school.marit, id, 'hold-8')
  expect(second).toMatchObject({ complete: true, submission: { state: 'decided' } })
  expect(await school.em().count(PointRelease, { shutAgainAt: null })).toBe(2)
  expect(await school.em().count(Mail)).toBe(1)
  // Stages without a point that Hold 8 needs are decided with it.
  expect(await school.em().count(Submission, { op: { $in: [140, 150] }, decision: 'release' })).toBe(2)
})

it('counts a first release no longer once the evidence moved on or somebody sent it back', async () => {
  for (const op of [140, 150, 160, 170]) await school.scored({ op, point: op === 160 ? 'witness-3' : op === 170 ? 'witness-5' : null })
  const { id } = await school.scored({ op: 190, point: 'hold-8' })
  await release(school.hanne, id, 'hold-8')
  const version = await school.moveOn(id)
  expect(await release(school.marit, id, 'hold-8', { seen: version })).toMatchObject({ complete: false })
  expect(await release(school.hanne, id, 'hold-8', { seen: version })).toMatchObject({ complete: true })
  expect(await school.em().count(PointRelease, { shutAgainAt: null })).toBe(2)

  const other = await school.anotherHead('DNK-0200')
  for (const op of [140, 150, 160, 170]) await school.scored({ op, head: other, point: op === 160 ? 'witness-3' : op === 170 ? 'witness-5' : null })
  const again = await school.scored({ op: 190, point: 'hold-8', head: other })
  await release(school.hanne, again.id, 'hold-8')
  await decide(school.marit, again.id, { decision: 'send-back', feedback: 'Once more.' })
  expect(await school.em().count(PointRelease, { head: other, shutAgainAt: null })).toBe(0)
})

it('decides with Hold 5 the stages without a point that it needs, and refuses while one of them is rejected', async () => {
  await school.scored({ op: 60, part: 'first', point: 'witness-1' })
  await school.scored({ op: 70, part: 'first', point: 'hold-4' })
  await school.scored({ op: 60 })
  const rest = await school.scored({ op: 70, changes: [{ criterion: 'W-01', cylinder: 3, side: 'exhaust', state: 'reject' }] })
  const guide = await school.scored({ op: 90 })
  const { id } = await school.scored({ op: 100, point: 'hold-5' })
  await expect(release(school.marit, id, 'hold-5')).rejects.toMatchObject({ code: 'release_forbidden', extra: { refused: [{ criterion: 'W-01', cylinder: 3, side: 'exhaust', state: 'reject' }] } })
  const seenWith = [{ id: rest.id, version: 1 }, { id: guide.id, version: 1 }]
  await school.moveOn(rest.id)
  await expect(release(school.marit, id, 'hold-5', { seenWith })).rejects.toMatchObject({ code: 'review_stale', extra: { changed: [expect.stringContaining('op 70')] } })
  await release(school.marit, id, 'hold-5', { seenWith: [{ id: rest.id, version: 2 }, { id: guide.id, version: 1 }] })
  const decided = await school.em().find(Submission, { state: 'decided' }, { orderBy: { op: 'asc' } })
  expect(decided.map(one => [one.op, one.part, one.decision])).toEqual([[60, 'rest', 'release'], [70, 'rest', 'release'], [90, 'rest', 'release'], [100, 'rest', 'release']])
})

it('sends back with a point only those stages whose proof did not do, not what a person had yet to judge', async () => {
  await school.scored({ op: 60 })
  await school.scored({ op: 70, changes: [{ criterion: 'W-08', state: 'not-assessed' }] })
  await school.scored({ op: 90, changes: [{ criterion: 'G-01', cylinder: 2, side: 'intake', state: 'not-assessed' }] })
  const { id } = await school.scored({ op: 100, point: 'hold-5', changes: [{ criterion: 'FB-01', state: 'reject' }] })
  await decide(school.marit, id, { decision: 'send-back', feedback: 'Three low lifts are down.' })
  const sent = await school.em().find(Submission, { decision: 'send-back' }, { orderBy: { op: 'asc' } })
  expect(sent.map(one => one.op)).toEqual([90, 100])
})

it('judges what a part re-measured by the later part alone', async () => {
  await school.scored({ op: 60 })
  await school.scored({ op: 70, part: 'first', point: 'hold-4', changes: [{ criterion: 'W-01', state: 'reject' }] })
  await school.scored({ op: 70 })
  await school.scored({ op: 90 })
  const { id } = await school.scored({ op: 100, point: 'hold-5' })
  await expect(release(school.marit, id, 'hold-5')).resolves.toMatchObject({ complete: true })
})

it('sends back: the try is decided with what was said, and the message names what to redo and where not to cut', async () => {
  const { id } = await bowl([{ criterion: 'W-01', state: 'reject', at: '12', value: 1.3, text: 'Land is down to 1.30 mm at 12 o\'clock.', band: { lo: 1.52, hi: 1.78, loKind: 'no-return', hiKind: 'put-right', softLo: 1.4, softHi: 2.1, borrowedFrom: null } }])
  await decide(school.hanne, id, { decision: 'send-back', feedback: 'Show me the land again.', sentences: [{ criterion: 'W-03i', cylinder: 1, side: 'intake', at: null, text: 'Throat is right where it should be.' }] })
  expect(await school.em().findOneOrFail(Submission, id)).toMatchObject({ state: 'decided', decision: 'send-back' })
  const [kept] = await school.em().find(Review, {})
  expect(kept!.sentences.find(one => one.criterion === 'W-03i')).toMatchObject({ text: 'Throat is right where it should be.', edited: true })
  expect(kept!.sentences.find(one => one.criterion === 'W-01')).toMatchObject({ text: 'Land is down to 1.30 mm at 12 o\'clock.', edited: false, state: 'reject' })
  const [mail] = await school.em().find(Mail, {})
  expect(mail).toMatchObject({ template: 'evidence-sent-back' })
  expect(mail!.subject).toMatch(/^DNK-0147 Bowl.*: one thing to redo$/)
  expect(mail!.text).toContain('Land is down to 1.30 mm at 12 o\'clock.')
  expect(mail!.text).toContain('Don\'t cut at 12 o\'clock, cylinder 1 intake until it is released.')
})

it('refuses a sentence for a result the review has not', async () => {
  const { id } = await bowl()
  await expect(decide(school.hanne, id, { decision: 'send-back', sentences: [{ criterion: 'W-01', cylinder: 4, side: 'intake', at: null, text: 'x' }] })).rejects.toMatchObject({ code: 'input_invalid', status: 422 })
  await nothingWasKept()
})

it('stops for a wall: a stop on the head, and a message that opens with the words for thin walls', async () => {
  const { id } = await bowl([{ criterion: 'W-06', state: 'reject', at: '12-6', value: 2.9, expandedUncertainty: 0.15, text: 'Thin.', band: { lo: 3.5, hi: null, loKind: 'no-return', hiKind: 'natural', softLo: 3, softHi: null, borrowedFrom: null } }])
  await decide(school.hanne, id, { decision: 'stop' })
  const [stop] = await school.em().find(HeadStop, {})
  expect(stop).toMatchObject({ criterion: 'W-06', point: 'hold-4', where: '12-6, cylinder 1 intake', liftedAt: null })
  const [mail] = await school.em().find(Mail, {})
  expect(mail!.subject).toBe('Stop cutting DNK-0147 12-6, cylinder 1 intake until we have spoken')
  expect(mail!.text.startsWith('Pressure test before anything else. This estimate has a doubt; the metal may be worse.')).toBe(true)
  expect(mail!.text).toMatch(/2\.9 mm, limit 3\.5 mm, doubt 0\.15 mm/)
  expect(mail!.text).toContain('Nothing else is wrong.')
  expect(mail!.text).not.toMatch(/\b(safe|cleared|pass|fail)\b/i)
})

it('does not say that nothing else is wrong when something is', async () => {
  const { id } = await bowl([{ criterion: 'W-06', state: 'reject' }, { criterion: 'W-01', state: 'reject' }])
  await decide(school.hanne, id, { decision: 'stop' })
  const [mail] = await school.em().find(Mail, {})
  expect(mail!.text).not.toContain('Nothing else is wrong')
})

it('asks for words where an instructor stops and no result says why', async () => {
  const { id } = await bowl()
  await expect(decide(school.hanne, id, { decision: 'stop' })).rejects.toMatchObject({ code: 'words_needed', status: 422 })
  await nothingWasKept()
  await decide(school.hanne, id, { decision: 'stop', feedback: 'The head moved on the stand.' })
  expect(await school.em().find(HeadStop, {})).toMatchObject([{ criterion: null, where: expect.stringContaining('op 70'), reason: 'The head moved on the stand.' }])
})

it('lifts a stop called at a point when a later try of that point is released', async () => {
  const { id } = await bowl([{ criterion: 'W-06', state: 'reject' }])
  await decide(school.hanne, id, { decision: 'stop' })
  const again = await school.scored({ op: 70, part: 'first', point: 'hold-4', tryNumber: 2 })
  await release(school.hanne, again.id, 'hold-4')
  expect(await school.em().find(HeadStop, {})).toMatchObject([{ liftedBy: { id: school.hanne.id }, liftReason: 'Hold 4 was released.' }])
})

it('counts a witness point as seen when its submission is released', async () => {
  const { id } = await school.scored({ op: 60, part: 'first', point: 'witness-1' })
  await school.em().transactional(async (tx) => {
    tx.persist(tx.create(WitnessCall, { head: tx.getReference(PracticeHead, school.headId), point: 'witness-1', toldBy: tx.getReference(User, school.imre.id), toldAt: school.now(), waitUntil: school.now(), seenBy: null, seenAt: null }))
  })
  await release(school.silas, id, 'witness-1')
  expect(await school.em().find(WitnessCall, {})).toMatchObject([{ seenBy: { id: school.silas.id } }])
})

it('scores with the person\'s states once it is decided', async () => {
  const { id } = await bowl()
  await decide(school.hanne, id, { decision: 'send-back', overrides: [{ criterion: 'W-01', state: 'borderline', reason: 'The loupe was out of date.' }] })
  const decided = await school.em().findOneOrFail(Submission, id)
  // Handbook 3.3: 100 Σ(w s)/Σ(w) with borderline 0.6. An intake article has eight criteria of the bowl, which weigh
  // 5 + 3 + 5 + 2 + 4 + 5 + 2 + 3 = 29 in the rubric; W-01 weighs 5.
  expect(decided.score).toBeCloseTo(100 * (29 - 5 * 0.4) / 29, 9)
})

it('leaves the audit chain whole after many decisions at once', async () => {
  const ids = await Promise.all(['DNK-0301', 'DNK-0302', 'DNK-0303', 'DNK-0304'].map(async number => (await school.scored({ op: 70, part: 'first', point: 'hold-4', head: await school.anotherHead(number) })).id))
  await Promise.all(ids.map(id => release(school.hanne, id, 'hold-4')))
  await sealAudit(school.em(), 'minute')
  expect(await verifyAudit(school.em(), new Date())).toMatchObject({ links: 4, problems: [] })
})
