import { BenchPlace } from '#server/db/entities/BenchPlace'
import { placeToken } from '#server/services/places/place-link'
import type { Actor } from '#server/utils/actor'
import { schoolDay } from '#shared/contract/school-day'
import { dayAfter } from '#shared/domain/money/calendar-days'
import { schoolConsent, schoolRubric } from '../review/school'
import { askedPlace } from './asked-place'
import { publishedFilm } from './published-film'
import { refundedPlace } from './refunded-place'
import type { World } from './world'

/*
 * The rights of every route: route x role x own/other (DESIGN, "People and rights").
 *
 * ADDING A ROUTE? Add its row here, by the name it has in server/openapi.json; `rights.test.ts` fails until you do.
 * `call` makes what the route is called upon, fresh for every call, and belonging to `owner`: to the caller where the column says
 * "own" (student, alumni), else to Imre, whose cohort "instructor" teaches and "other instructor" does not. Give a body that is good:
 * input is checked before ownership, so a bad one would hide a missing right.
 * 'yes' is any answer but 401, 403, 404, 405 and 5xx: whether the work can be done is tested elsewhere.
 */

export type Outcome = 'yes' | 401 | 403 | 404
export const columns = ['nobody', 'student', 'other student', 'alumni', 'instructor', 'other instructor', 'admin', 'safety'] as const
export type Column = (typeof columns)[number]
export interface MatrixRow {
  /** "GET /api/heads/{id}" as server/openapi.json has it. */
  route: string
  who: Record<Column, Outcome>
  /** `caller` is who calls, owner where nobody does: an upload belongs to whoever uses it. */
  call: (world: World, owner: Actor, caller: Actor) => Promise<{ path: string, body?: unknown }>
}

const row = (route: string, who: MatrixRow['who'], call: MatrixRow['call']): MatrixRow => ({ route, who, call })
const at = (path: string, body?: unknown) => async () => ({ path, body })

const everybody: MatrixRow['who'] = { 'nobody': 'yes', 'student': 'yes', 'other student': 'yes', 'alumni': 'yes', 'instructor': 'yes', 'other instructor': 'yes', 'admin': 'yes', 'safety': 'yes' }
const signedIn: MatrixRow['who'] = { ...everybody, nobody: 401 }
const noRole: MatrixRow['who'] = { 'nobody': 401, 'student': 403, 'other student': 403, 'alumni': 403, 'instructor': 403, 'other instructor': 403, 'admin': 403, 'safety': 403 }
/** Own head, or a head of a cohort taught; nobody else. */
const workOnHead: MatrixRow['who'] = { ...noRole, 'student': 'yes', 'other student': 404, 'alumni': 'yes', 'instructor': 'yes', 'other instructor': 404 }
const seeHead: MatrixRow['who'] = { ...workOnHead, admin: 'yes' }
const students: MatrixRow['who'] = { ...noRole, 'student': 'yes', 'other student': 'yes', 'alumni': 'yes' }
const instructors: MatrixRow['who'] = { ...noRole, 'instructor': 'yes', 'other instructor': 'yes' }
const taught: MatrixRow['who'] = { ...noRole, 'instructor': 'yes', 'other instructor': 404 }

/** A note is of whoever wrote it; nobody else's, staff's neither. */
const ownNote: MatrixRow['who'] = { 'nobody': 401, 'student': 'yes', 'other student': 404, 'alumni': 'yes', 'instructor': 404, 'other instructor': 404, 'admin': 404, 'safety': 404 }
const lessonDocument = { type: 'doc', content: [{ type: 'paragraph', content: [{ type: 'text', text: 'Scribe one line.' }] }] }

export const matrix: readonly MatrixRow[] = [
  // open to all
  row('GET /api/health', everybody, at('/api/health')),
  row('GET /api/openapi.json', everybody, at('/api/openapi.json')),
  row('GET /api/auth/{path}', everybody, at('/api/auth/csrf')),
  row('POST /api/auth/{path}', everybody, at('/api/auth/signout', {})),
  row('POST /api/password/forgot', everybody, at('/api/password/forgot', { email: 'nobody@sallowbeck.example' })),
  row('POST /api/password/set', everybody, at('/api/password/set', { token: 'x'.repeat(40), password: 'ten letters and more' })),
  // Whose message it is its signature says, not a role.
  row('POST /api/payments/webhook', everybody, at('/api/payments/webhook', {})),
  row('POST /api/payments/returned', everybody, async (world, owner) => ({ path: '/api/payments/returned', body: { token: placeToken(world.harness.app, await world.harness.app.orm.em.fork().findOneOrFail(BenchPlace, { person: owner.id })) } })),

  // places: who has the mailed link may do what the asker may
  row('GET /api/courses', everybody, at('/api/courses')),
  row('GET /api/cohorts/{code}/offer', everybody, async world => ({ path: `/api/cohorts/${(await askedPlace(world)).code}/offer` })),
  row('POST /api/cohorts/{code}/asks', everybody, async world => ({ path: `/api/cohorts/${(await askedPlace(world)).code}/asks`, body: { name: 'Wen', email: `${crypto.randomUUID()}@sallowbeck.example` } })),
  row('GET /api/place-links/{token}', everybody, async world => ({ path: `/api/place-links/${(await askedPlace(world)).token}` })),
  row('POST /api/place-links/{token}/open', everybody, async world => ({ path: `/api/place-links/${(await askedPlace(world)).token}/open`, body: {} })),
  row('POST /api/place-links/{token}/pass', everybody, async world => ({ path: `/api/place-links/${(await askedPlace(world)).token}/pass`, body: {} })),
  row('POST /api/place-links/{token}/pay', everybody, async world => ({ path: `/api/place-links/${(await askedPlace(world)).token}/pay`, body: { purpose: 'deposit' } })),
  row('GET /api/place-links/{token}/receipts/{number}', everybody, async (world) => {
    const { token, receipt } = await askedPlace(world)
    return { path: `/api/place-links/${token}/receipts/${receipt}` }
  }),
  // the office's places
  row('GET /api/cohorts', { ...instructors, admin: 'yes' }, at('/api/cohorts')),
  row('POST /api/cohorts', { ...noRole, admin: 'yes' }, at('/api/cohorts', { code: 'DOR-27', name: 'Dorrow', startsOn: '2027-02-08', endsOn: '2027-05-06', pattern: 'evenings', places: 8, priceMinor: 245_000, depositMinor: 35_000, open: true })),
  row('POST /api/cohorts/{code}', { ...noRole, admin: 'yes' }, async world => ({ path: `/api/cohorts/${(await askedPlace(world)).code}`, body: { pattern: 'Saturdays' } })),
  row('GET /api/cohorts/{code}/list', { ...taught, admin: 'yes' }, at('/api/cohorts/ALD-26/list')),
  row('POST /api/cohorts/{code}/roster/preview', { ...noRole, admin: 'yes' }, at('/api/cohorts/ALD-26/roster/preview', { csv: 'name,email\nWen,wen@sallowbeck.example' })),
  // A list that was never looked at is refused, which is a yes to the person.
  row('POST /api/cohorts/{code}/roster', { ...noRole, admin: 'yes' }, at('/api/cohorts/ALD-26/roster', { csv: 'name,email\nWen,wen@sallowbeck.example', seen: 'a'.repeat(64) })),
  row('GET /api/places', { ...noRole, admin: 'yes' }, at('/api/places')),
  row('GET /api/places/{id}', { ...noRole, admin: 'yes' }, async world => ({ path: `/api/places/${(await askedPlace(world)).id}` })),
  row('GET /api/places/{id}/refund-quote', { ...noRole, admin: 'yes' }, async world => ({ path: `/api/places/${(await askedPlace(world, 'deposit-paid')).id}/refund-quote` })),
  row('POST /api/places/{id}/steps', { ...noRole, admin: 'yes' }, async world => ({ path: `/api/places/${(await askedPlace(world)).id}/steps`, body: { step: 'withdraw-offer' } })),
  row('POST /api/places/{id}/cancel', { ...noRole, admin: 'yes' }, async world => ({ path: `/api/places/${(await askedPlace(world)).id}/cancel`, body: { cause: 'student', seenMinor: 0 } })),
  row('POST /api/places/{id}/move', { ...noRole, admin: 'yes' }, async (world) => {
    const [from, to] = [await askedPlace(world, 'deposit-paid'), await askedPlace(world)]
    return { path: `/api/places/${from.id}/move`, body: { to: to.code } }
  }),
  row('POST /api/places/{id}/order', { ...noRole, admin: 'yes' }, async world => ({ path: `/api/places/${(await askedPlace(world)).id}/order`, body: { organisation: 'Hexley Row Rebuild Ltd', contact: 'Morag Stanyon', email: 'morag@hexley.example', number: crypto.randomUUID(), amountMinor: 245_000 } })),
  row('POST /api/places/{id}/bank-payments', { ...noRole, admin: 'yes' }, async world => ({ path: `/api/places/${(await askedPlace(world, 'deposit-paid')).id}/bank-payments`, body: { purpose: 'balance', amountMinor: 1000, reference: crypto.randomUUID(), on: '2026-03-01' } })),
  row('GET /api/sponsors', { ...noRole, admin: 'yes' }, at('/api/sponsors')),

  // oneself
  row('GET /api/me', signedIn, at('/api/me')),
  // money
  row('GET /api/ledger', { ...noRole, admin: 'yes' }, at('/api/ledger')),
  row('GET /api/ledger/csv', { ...noRole, admin: 'yes' }, at('/api/ledger/csv')),
  row('GET /api/money/open', { ...noRole, admin: 'yes' }, at('/api/money/open')),
  row('GET /api/receipts/{number}/file', { ...noRole, 'student': 'yes', 'other student': 404, 'alumni': 'yes', 'admin': 'yes' }, async (world, owner) => ({ path: `/api/receipts/${(await refundedPlace(world, owner)).receipt}/file` })),
  row('POST /api/places/{id}/refunds', { ...noRole, admin: 'yes' }, async (world, owner) => ({ path: `/api/places/${(await refundedPlace(world, owner)).id}/refunds`, body: { amountMinor: 100, reason: 'A pound.' } })),
  row('POST /api/places/{id}/bank-refunds', { ...noRole, admin: 'yes' }, async (world, owner) => {
    const { id, refund } = await refundedPlace(world, owner)
    return { path: `/api/places/${id}/bank-refunds`, body: { refundId: refund, reference: crypto.randomUUID(), on: '2026-03-01' } }
  }),
  // It goes by bank, so the processor cannot be asked again, which is a yes to the person.
  row('POST /api/refunds/{id}/again', { ...noRole, admin: 'yes' }, async (world, owner) => ({ path: `/api/refunds/${(await refundedPlace(world, owner)).refund}/again`, body: {} })),

  row('GET /api/me/places', signedIn, at('/api/me/places')),
  row('GET /api/me/sessions', signedIn, at('/api/me/sessions')),
  row('DELETE /api/me/sessions/{id}', { 'nobody': 401, 'student': 404, 'other student': 404, 'alumni': 404, 'instructor': 404, 'other instructor': 404, 'admin': 404, 'safety': 404 }, at('/api/me/sessions/00000000-0000-4000-8000-000000000000')),
  row('POST /api/me/sign-out-everywhere', signedIn, at('/api/me/sign-out-everywhere', {})),

  // heads
  row('GET /api/heads', signedIn, at('/api/heads')),
  row('GET /api/heads/{id}', { ...seeHead, safety: 'yes' }, async (world, owner) => ({ path: `/api/heads/${await world.head(owner)}` })),
  row('GET /api/heads/{id}/spots', seeHead, async (world, owner) => ({ path: `/api/heads/${await world.head(owner)}/spots` })),
  row('GET /api/heads/{id}/curves', seeHead, async (world, owner) => ({ path: `/api/heads/${await world.head(owner)}/curves` })),
  row('GET /api/bench', students, at('/api/bench')),
  row('POST /api/heads/{id}/stages/{op}/submissions', workOnHead, async (world, owner) => ({ path: `/api/heads/${await world.head(owner)}/stages/70/submissions`, body: {} })),
  row('POST /api/heads/{id}/acid-cleaned', workOnHead, async (world, owner) => ({ path: `/api/heads/${await world.head(owner)}/acid-cleaned`, body: { acidCleaned: false } })),
  row('POST /api/heads/{id}/stop', { ...taught, safety: 'yes' }, async (world, owner) => ({ path: `/api/heads/${await world.head(owner)}/stop`, body: { where: 'bowl wall', reason: 'Look again.' } })),
  // The safety officer lifts what the safety officer stopped; this one is an instructor's.
  row('POST /api/stops/{id}/lift', { ...taught, safety: 404 }, async (world, owner) => ({ path: `/api/stops/${await world.stop(owner, world.school.hanne)}/lift`, body: { reason: 'Read again and held.' } })),
  // Witness 1 is told to the chamber instructor; Hanne may not sign it.
  row('POST /api/heads/{id}/points/{code}/seen', { ...taught, instructor: 403, safety: 403 }, async (world, owner) => ({ path: `/api/heads/${await world.told(owner)}/points/witness-1/seen`, body: {} })),

  // submissions and evidence
  row('POST /api/submissions/{id}/ask', workOnHead, async (world, owner) => ({ path: `/api/submissions/${await world.draft(owner)}/ask`, body: {} })),
  row('GET /api/submissions/{id}', seeHead, async (world, owner) => ({ path: `/api/submissions/${await world.scored(owner)}` })),
  row('GET /api/submissions/{id}/gauges', workOnHead, async (world, owner) => ({ path: `/api/submissions/${await world.draft(owner)}/gauges` })),
  row('GET /api/submissions/{id}/events', seeHead, async (world, owner) => ({ path: `/api/submissions/${await world.draft(owner)}/events` })),
  row('POST /api/uploads', { ...noRole, ...students, ...{ 'instructor': 'yes', 'other instructor': 'yes' } }, at('/api/uploads', { purpose: 'photo', filename: 'a.jpg', bytes: 10, contentType: 'image/jpeg', sha256: 'a'.repeat(64) })),
  row('GET /api/uploads/{id}', { ...noRole, 'student': 'yes', 'other student': 404, 'alumni': 'yes', 'instructor': 404, 'other instructor': 404 }, async (world, owner) => ({ path: `/api/uploads/${await world.upload(owner, 'photo')}` })),
  row('POST /api/uploads/{id}/complete', { ...noRole, 'student': 'yes', 'other student': 404, 'alumni': 'yes', 'instructor': 404, 'other instructor': 404 }, async (world, owner) => ({ path: `/api/uploads/${await world.upload(owner, 'photo')}/complete`, body: {} })),
  row('POST /api/submissions/{id}/photos', workOnHead, async (world, owner, caller) => ({ path: `/api/submissions/${await world.draft(owner)}/photos`, body: { uploadId: await world.upload(caller, 'photo'), view: 'view-12', cylinder: 1, side: 'intake' } })),
  row('POST /api/submissions/{id}/documents', workOnHead, async (world, owner, caller) => ({ path: `/api/submissions/${await world.draft(owner)}/documents`, body: { uploadId: await world.upload(caller, 'document') } })),
  row('GET /api/documents/{id}/file', workOnHead, async (world, owner) => ({ path: `/api/documents/${await world.document(owner)}/file` })),
  row('POST /api/submissions/{id}/readings', workOnHead, async (world, owner) => ({ path: `/api/submissions/${await world.draft(owner)}/readings`, body: { quantity: 'seat-land', cylinder: 1, side: 'intake', values: ['1.62'], unit: 'mm', instrument: 'loupe' } })),
  row('POST /api/submissions/{id}/flow-sheets', workOnHead, async (world, owner, caller) => ({ path: `/api/submissions/${await world.draft(owner)}/flow-sheets`, body: { uploadId: await world.upload(caller, 'flow-sheet') } })),
  row('POST /api/flow-sheets/{id}/use', workOnHead, async (world, owner) => ({ path: `/api/flow-sheets/${await world.sheet(owner)}/use`, body: {} })),
  row('POST /api/flow-sheets/{id}/set-aside', workOnHead, async (world, owner) => ({ path: `/api/flow-sheets/${await world.sheet(owner)}/set-aside`, body: {} })),
  // The safety officer sees view-13 only; this is a seat close-up.
  row('GET /api/photos/{id}/image', { ...workOnHead, safety: 404 }, async (world, owner) => ({ path: `/api/photos/${await world.photo(owner)}/image` })),
  row('POST /api/photos/{id}/set-aside', workOnHead, async (world, owner) => ({ path: `/api/photos/${await world.photo(owner)}/set-aside`, body: {} })),

  // review and feedback
  row('GET /api/review-queue', instructors, at('/api/review-queue')),
  row('GET /api/shop-board', { ...instructors, safety: 'yes' }, at('/api/shop-board')),
  row('GET /api/submissions/{id}/review-sheet', taught, async (world, owner) => ({ path: `/api/submissions/${await world.scored(owner)}/review-sheet` })),
  row('POST /api/submissions/{id}/review', taught, async (world, owner) => ({ path: `/api/submissions/${await world.scored(owner)}/review`, body: { seen: 1, decision: 'send-back', point: 'hold-4', feedback: 'Take it again.' } })),
  row('GET /api/feedback', students, at('/api/feedback')),
  row('GET /api/submissions/{id}/feedback', workOnHead, async (world, owner) => ({ path: `/api/submissions/${await world.scored(owner)}/feedback` })),
  row('POST /api/submissions/{id}/feedback/read', { ...students, 'other student': 404 }, async (world, owner) => ({ path: `/api/submissions/${await world.scored(owner)}/feedback/read`, body: {} })),

  // people and work
  row('GET /api/people', { ...noRole, admin: 'yes' }, at('/api/people')),
  row('GET /api/people/{id}', { ...noRole, admin: 'yes' }, async world => ({ path: `/api/people/${world.bettany.id}` })),
  row('POST /api/people/{id}/roles', { ...noRole, admin: 'yes' }, async world => ({ path: `/api/people/${world.bettany.id}/roles`, body: { roles: ['student'] } })),
  row('POST /api/people/{id}/name', { ...noRole, admin: 'yes' }, async world => ({ path: `/api/people/${world.bettany.id}/name`, body: { name: 'Bettany Crake' } })),
  row('POST /api/people/{id}/end-sessions', { ...noRole, admin: 'yes' }, async world => ({ path: `/api/people/${world.stranger.id}/end-sessions`, body: {} })),
  row('POST /api/people/{id}/invite-again', { ...noRole, admin: 'yes' }, async world => ({ path: `/api/people/${world.stranger.id}/invite-again`, body: {} })),
  row('GET /api/audit', { ...noRole, 'instructor': 'yes', 'other instructor': 'yes', 'admin': 'yes', 'safety': 'yes' }, at('/api/audit')),
  row('POST /api/people/invitations', { ...noRole, admin: 'yes' }, async () => ({ path: '/api/people/invitations', body: { name: 'Wen Sallis', email: `${crypto.randomUUID()}@sallowbeck.example`, roles: ['student'] } })),
  row('GET /api/jobs/stuck', { ...noRole, admin: 'yes' }, at('/api/jobs/stuck')),
  row('POST /api/jobs/{id}/rerun', { ...noRole, admin: 404 }, at('/api/jobs/00000000-0000-4000-8000-000000000000/rerun', {})),

  row('GET /api/mails', { ...noRole, admin: 'yes' }, at('/api/mails')),
  row('POST /api/mails/{id}/resend', { ...noRole, admin: 'yes' }, async world => ({ path: `/api/mails/${await world.mail()}/resend`, body: {} })),

  // the safety form and clearances; a second signature of one version is refused, which is a yes to the person
  row('GET /api/consent', signedIn, at('/api/consent')),
  row('POST /api/consent', signedIn, at('/api/consent', { version: 1, ticks: schoolConsent.clauses.map(one => one.code), signedAs: 'Imre Tallowin', under18: false })),
  row('POST /api/consent/choices', signedIn, at('/api/consent/choices', { code: 'cohort-photos', allowed: true })),
  row('POST /api/consent/note', signedIn, at('/api/consent/note', { firstAid: '', bootSize: '9' })),
  row('GET /api/consent/text', { ...noRole, admin: 'yes', safety: 'yes' }, at('/api/consent/text')),
  row('POST /api/consent/text', { ...noRole, safety: 'yes' }, at('/api/consent/text', { after: 1, clauses: schoolConsent.clauses, choices: schoolConsent.choices })),
  row('GET /api/clearances', { ...noRole, admin: 'yes', safety: 'yes' }, at('/api/clearances')),
  row('GET /api/clearances/people/{id}', { ...noRole, admin: 'yes', safety: 'yes' }, async (_world, owner) => ({ path: `/api/clearances/people/${owner.id}` })),
  row('POST /api/clearances', { ...noRole, safety: 'yes' }, async (world, owner) => ({ path: '/api/clearances', body: { person: owner.id, tool: 'die-grinder', until: dayAfter(schoolDay(world.school.now()), 30) } })),
  row('POST /api/clearances/{id}/withdraw', { ...noRole, safety: 'yes' }, async (world, owner) => ({ path: `/api/clearances/${await world.clearance(owner)}/withdraw`, body: {} })),

  // what the school works by
  row('GET /api/lessons', signedIn, at('/api/lessons')),
  row('GET /api/lessons/{slug}', signedIn, async world => ({ path: `/api/lessons/${await world.lesson()}` })),
  row('POST /api/lessons', instructors, at('/api/lessons', { title: 'Valve lapping', module: 1 })),
  row('GET /api/lessons/{slug}/versions', signedIn, async world => ({ path: `/api/lessons/${await world.lesson()}/versions` })),
  row('GET /api/lessons/{slug}/draft', instructors, async world => ({ path: `/api/lessons/${await world.lesson()}/draft` })),
  row('POST /api/lessons/{slug}/draft', instructors, async world => ({ path: `/api/lessons/${await world.lesson()}/draft`, body: { seen: 0, title: 'Scribing', document: lessonDocument } })),
  row('POST /api/lessons/{slug}/preview', instructors, async world => ({ path: `/api/lessons/${await world.lesson()}/preview`, body: { title: 'Scribing', document: lessonDocument } })),
  // Nothing is written in a lesson nobody touched, which is a yes to the person.
  row('POST /api/lessons/{slug}/publish', instructors, async world => ({ path: `/api/lessons/${await world.lesson()}/publish`, body: { seen: 1, whatChanged: 'A word.', why: 'It was wrong.' } })),
  row('POST /api/lessons/{slug}/progress', signedIn, async world => ({ path: `/api/lessons/${await world.lesson()}/progress`, body: { anchor: null } })),
  row('GET /api/lessons/{slug}/notes', signedIn, async world => ({ path: `/api/lessons/${await world.lesson()}/notes` })),
  row('POST /api/lessons/{slug}/notes', signedIn, async world => ({ path: `/api/lessons/${await world.lesson()}/notes`, body: { anchor: null, text: 'Ask about this.' } })),
  row('GET /api/notes', signedIn, at('/api/notes')),
  row('POST /api/notes/{id}', ownNote, async (world, owner) => ({ path: `/api/notes/${await world.note(owner)}`, body: { anchor: null, text: 'Asked.' } })),
  row('DELETE /api/notes/{id}', ownNote, async (world, owner) => ({ path: `/api/notes/${await world.note(owner)}` })),
  row('GET /api/search', signedIn, at('/api/search?q=scribe')),
  row('GET /api/shelf', students, at('/api/shelf')),
  // pictures and films for lessons: read while one may read lessons, written by instructors
  row('GET /api/media', instructors, at('/api/media')),
  row('POST /api/media', { ...noRole, 'instructor': 'yes', 'other instructor': 'yes' }, async (world, _owner, caller) => ({ path: '/api/media', body: { uploadId: await world.upload(caller, 'lesson-media'), title: 'Scribing' } })),
  row('GET /api/media/{id}', signedIn, async world => ({ path: `/api/media/${await publishedFilm(world)}` })),
  row('GET /api/media/{id}/file', signedIn, async world => ({ path: `/api/media/${await publishedFilm(world)}/file` })),
  row('POST /api/media/{id}/tracks', instructors, async world => ({ path: `/api/media/${await publishedFilm(world)}/tracks`, body: { kind: 'captions', vtt: 'WEBVTT\n\n00:00.000 --> 00:01.000\nUpright\n' } })),
  row('GET /api/media/{id}/tracks/{file}', signedIn, async world => ({ path: `/api/media/${await publishedFilm(world)}/tracks/captions.vtt` })),
  row('POST /api/media/{id}/position', signedIn, async world => ({ path: `/api/media/${await publishedFilm(world)}/position`, body: { seconds: 1 } })),
  row('GET /api/instruments', signedIn, at('/api/instruments')),
  row('GET /api/castings', signedIn, at('/api/castings')),
  row('GET /api/benches', signedIn, at('/api/benches')),
  row('GET /api/rubrics', signedIn, at('/api/rubrics')),
  row('GET /api/rubrics/{version}', signedIn, at('/api/rubrics/1')),
  // The second of them is stale, which is a yes to the person.
  row('POST /api/rubrics', instructors, async () => ({ path: '/api/rubrics', body: { after: 1, note: 'The same again.', rubric: schoolRubric } })),

  // numbers by hand
  row('GET /api/compute', signedIn, at('/api/compute')),
  // With inputs left out it is refused for those, which is a yes to the person.
  row('POST /api/compute/{quantity}', signedIn, at('/api/compute/air-density', {})),
]
