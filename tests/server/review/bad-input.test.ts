import { afterAll, beforeAll, expect, it } from 'vitest'
import { AuditEvent } from '#server/db/entities/AuditEvent'
import { Mail } from '#server/db/entities/Mail'
import { Review } from '#server/db/entities/Review'
import { User } from '#server/db/entities/User'
import { openHarness, type Harness } from '../harness'
import { serveApi, type Api, type Caller } from '../http'
import { makeSchool, type TestSchool } from './school'

let harness: Harness, api: Api, school: TestSchool, hanne: Caller, corin: Caller
let id: string
beforeAll(async () => {
  harness = await openHarness()
  api = await serveApi(harness)
  school = await makeSchool(harness)
  hanne = await api.as(school.hanne)
  corin = await api.as(school.corin)
  id = (await school.scored({ op: 70, part: 'first', point: 'hold-4' })).id
})
afterAll(async () => {
  await api?.close()
  await harness?.close()
})

const good = { seen: 1, decision: 'send-back', point: 'hold-4' }
const pin = { photoId: crypto.randomUUID(), x: 0.5, y: 0.5, criterion: 'W-01' }

it.each<[string, string, number, string]>([
  ['NaN in a pin', `{"seen":1,"decision":"send-back","pins":[{"photoId":"${pin.photoId}","x":NaN,"y":0,"criterion":"W-01"}]}`, 400, 'body_not_json'],
  ['1e999 in a pin', `{"seen":1,"decision":"send-back","pins":[{"photoId":"${pin.photoId}","x":1e999,"y":0,"criterion":"W-01"}]}`, 422, 'input_invalid'],
  ['a pin beside the picture', JSON.stringify({ ...good, pins: [{ ...pin, x: 1.01 }] }), 422, 'input_invalid'],
  ['a pin on a foreign photo', JSON.stringify({ ...good, pins: [pin] }), 422, 'pin_outside'],
  ['a NUL in the words', JSON.stringify({ ...good, feedback: 'a\0b' }), 422, 'input_invalid'],
  ['a lone surrogate in a reason', '{"seen":1,"decision":"send-back","overrides":[{"criterion":"W-01","state":"borderline","reason":"\\ud800"}]}', 422, 'input_invalid'],
  ['a NUL in a criterion', JSON.stringify({ ...good, reasons: [{ criterion: 'W-01\0', reason: 'x' }] }), 422, 'input_invalid'],
  ['a NUL in the name of a spot', JSON.stringify({ ...good, sentences: [{ criterion: 'W-01', at: 'a\0', text: 'x' }] }), 422, 'input_invalid'],
  ['side "left"', JSON.stringify({ ...good, overrides: [{ criterion: 'W-01', side: 'left', state: 'borderline', reason: 'x' }] }), 422, 'input_invalid'],
  ['cylinder 9', JSON.stringify({ ...good, overrides: [{ criterion: 'W-01', cylinder: 9, state: 'borderline', reason: 'x' }] }), 422, 'override_outside'],
  ['an override without a reason', JSON.stringify({ ...good, overrides: [{ criterion: 'W-01', state: 'borderline', reason: '  ' }] }), 422, 'input_invalid'],
  ['an override outside the stage', JSON.stringify({ ...good, overrides: [{ criterion: 'FB-01', state: 'borderline', reason: 'x' }] }), 422, 'override_outside'],
  ['an override to "does not apply"', JSON.stringify({ ...good, overrides: [{ criterion: 'W-01', state: 'does-not-apply', reason: 'x' }] }), 422, 'input_invalid'],
  ['a decision there is none of', JSON.stringify({ ...good, decision: 'pass' }), 422, 'input_invalid'],
  ['a field nobody knows', JSON.stringify({ ...good, score: 100 }), 422, 'input_invalid'],
  ['a version of zero', JSON.stringify({ ...good, seen: 0 }), 422, 'input_invalid'],
  ['a version that was never', JSON.stringify({ ...good, seen: 7 }), 409, 'review_stale'],
  ['half a body', '{"seen":1,', 400, 'body_not_json'],
  ['a list for a body', '[]', 422, 'input_invalid'],
  ['words longer than a book', JSON.stringify({ ...good, feedback: 'a'.repeat(5001) }), 422, 'input_invalid'],
  ['a body of two megabytes', JSON.stringify({ ...good, feedback: 'a'.repeat(2_000_000) }), 413, 'body_too_large'],
])('a review with %s is refused, and nothing is kept', async (_, body, status, code) => {
  const answer = await hanne.call('POST', `/api/submissions/${id}/review`, body)
  expect([answer.status, answer.body.code]).toEqual([status, code])
  expect(answer.headers.get('content-type')).toContain('application/problem+json')
  expect(await school.em().count(Review)).toBe(0)
  expect(await school.em().count(Mail)).toBe(0)
})

it.each(['not-an-id', '00000000-0000-4000-8000-000000000000', `${'9'.repeat(400)}`, '%00', '..%2f..'])('the id "%s" is nobody\'s submission', async (wrong) => {
  const answer = await hanne.post(`/api/submissions/${wrong}/review`, good)
  expect(answer.status).toBe(404)
})

it('refuses another type than JSON, and another site', async () => {
  const form = await hanne.call('POST', `/api/submissions/${id}/review`, 'seen=1', { 'content-type': 'application/x-www-form-urlencoded' })
  expect([form.status, form.body.code]).toEqual([415, 'json_needed'])
  const foreign = await hanne.call('POST', `/api/submissions/${id}/review`, good, { origin: 'https://elsewhere.example' })
  expect([foreign.status, foreign.body.code]).toEqual([403, 'foreign_origin'])
  const nobody = await api.nobody.post(`/api/submissions/${id}/review`, good)
  expect([nobody.status, nobody.body.code]).toEqual([401, 'sign_in_needed'])
})

it('reviews once under one key, and refuses the key with another body', async () => {
  const one = (await school.scored({ op: 70, part: 'first', point: 'hold-4', head: await school.anotherHead('DNK-0400') })).id
  const key = crypto.randomUUID()
  const path = `/api/submissions/${one}/review`
  const [first, second] = await Promise.all([hanne.post(path, good, key), hanne.post(path, good, key)])
  expect([first.status, second.status]).toEqual([200, 200])
  expect(second.body).toEqual(first.body)
  expect(await school.em().count(Review, { submission: one })).toBe(1)
  expect(await school.em().count(Mail, {})).toBe(1)
  expect(await school.em().count(AuditEvent, { action: 'review-send-back' })).toBe(1)
  const other = await hanne.post(path, { ...good, feedback: 'other' }, key)
  expect([other.status, other.body.code]).toEqual([409, 'idempotency_conflict'])
  const badKey = await hanne.call('POST', path, good, { 'idempotency-key': 'yesterday' })
  expect([badKey.status, badKey.body.code]).toEqual([422, 'idempotency_key_invalid'])
})

it('forgets a refused review: the same key may be used again once it is mended', async () => {
  const one = (await school.scored({ op: 70, part: 'first', point: 'hold-4', head: await school.anotherHead('DNK-0401') })).id
  const key = crypto.randomUUID()
  const refused = await hanne.post(`/api/submissions/${one}/review`, { ...good, seen: 2 }, key)
  expect(refused.status).toBe(409)
  expect((await hanne.post(`/api/submissions/${one}/review`, good, key)).status).toBe(200)
})

it.each<[string, string, unknown, number, string]>([
  ['a stop without words', '/api/heads/HEAD/stop', { where: 'bowl', reason: '' }, 422, 'input_invalid'],
  ['a stop with a NUL', '/api/heads/HEAD/stop', { where: 'bo\0wl', reason: 'x' }, 422, 'input_invalid'],
  ['a witness point that is a hold', '/api/heads/HEAD/points/hold-4/seen', {}, 422, 'point_not_due'],
  ['a witness point with another name', '/api/heads/HEAD/points/witness-99/seen', {}, 404, 'id_invalid'],
  ['a witness point nobody was told of', '/api/heads/HEAD/points/witness-1/seen', {}, 403, 'point_not_yours'],
])('%s is refused', async (_, path, body, status, code) => {
  const answer = await hanne.post(path.replace('HEAD', school.headId), body)
  expect([answer.status, answer.body.code]).toEqual([status, code])
})

it.each(['after=rubbish', 'limit=0', 'limit=101', 'limit=ten', 'mine=perhaps', `cohort=${'a'.repeat(21)}`, 'cohort=%00', 'point=%00'])('the queue asked with %s is refused', async (query) => {
  const { status, body } = await hanne.get(`/api/review-queue?${query}`)
  expect(status).toBe(422)
  expect(['input_invalid', 'page_unknown']).toContain(body.code)
})

it.each<[string, unknown]>([
  ['no e-mail', { name: 'Wen', email: 'wen', roles: ['student'] }],
  ['no role', { name: 'Wen', email: 'wen@sallowbeck.example', roles: [] }],
  ['a role there is none of', { name: 'Wen', email: 'wen@sallowbeck.example', roles: ['owner'] }],
  ['a NUL in the name', { name: 'W\0en', email: 'wen@sallowbeck.example', roles: ['student'] }],
  ['a lone surrogate in the name', { name: 'W\ud800en', email: 'wen@sallowbeck.example', roles: ['student'] }],
  ['a NUL in the e-mail', { name: 'Wen', email: 'we\0n@sallowbeck.example', roles: ['student'] }],
])('an invitation with %s is refused, and nobody is made', async (_, body) => {
  const answer = await corin.post('/api/people/invitations', body)
  expect([answer.status, answer.body.code]).toEqual([422, 'input_invalid'])
  expect(await school.em().count(User, { name: { $like: 'W%' } })).toBe(0)
})

it.each<[string, unknown, number, string]>([
  ['nine characters', { token: 'a'.repeat(40), password: 'a'.repeat(9) }, 422, 'input_invalid'],
  ['a NUL', { token: 'a'.repeat(40), password: 'aaaaaaaaaa\0' }, 422, 'input_invalid'],
  ['a lone surrogate', { token: 'a'.repeat(40), password: 'aaaaaaaaaa\ud800' }, 422, 'input_invalid'],
  ['a link nobody sent', { token: 'a'.repeat(40), password: 'ten letters and more' }, 410, 'link_not_usable'],
  ['a NUL in the link', { token: `${'a'.repeat(40)}\0`, password: 'ten letters and more' }, 410, 'link_not_usable'],
])('a new password with %s is refused', async (_, body, status, code) => {
  const answer = await api.nobody.post('/api/password/set', body)
  expect([answer.status, answer.body.code]).toEqual([status, code])
})
