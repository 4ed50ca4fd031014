import { z } from 'zod'
import { receiptParams, type Money } from './money'
import { cleanText, someText } from './text'

/**
 * Places, from the ask to the last evening: what strangers, students and the office send and see. Dates are YYYY-MM-DD, instants ISO.
 *
 * For everybody: GET /api/courses `{ items: CourseView[] }` · GET /api/cohorts/{code}/offer `CohortOffer` (404 unknown) · POST /api/cohorts/{code}/asks `PlaceAskAnswer`.
 * Who has the mailed link: GET /api/place-links/{token} `PlaceLinkView` · POST …/open and …/pass, both answer the view · POST …/pay `PayAnswer`.
 * The office: GET /api/places `Page<PlaceRow>` · GET /api/places/{id} `PlaceView` · GET …/refund-quote · POST …/steps, …/cancel, …/move, …/order, …/bank-payments, …/refunds
 * · GET and POST /api/cohorts (`{ items: CohortRow[] }`), POST /api/cohorts/{code} `CohortChange` · POST …/roster/preview, …/roster · GET …/list `CohortListView`.
 */

export const cohortParams = z.object({ code: z.string().regex(/^[A-Z0-9-]{3,20}$/) })
export const linkParams = z.object({ token: z.string().min(20).max(200) })
export const receiptLinkParams = linkParams.merge(receiptParams)
const email = z.string().trim().toLowerCase().email('an e-mail address').max(254)
/** A day of the calendar that there is: not the 31st of February. */
export const date = z.string().regex(/^\d{4}-\d{2}-\d{2}$/, 'is not a date').refine((text) => {
  const at = new Date(`${text}T00:00:00Z`)
  return Number.isFinite(at.getTime()) && at.toISOString().startsWith(text)
}, 'is not a date')

export type PlaceState = 'asked' | 'offered' | 'deposit-paid' | 'confirmed' | 'here' | 'finished' | 'waiting-list' | 'moved' | 'cancelled' | 'stopped'

/** A cohort as a stranger sees it. */
export interface CohortOffer {
  code: string, name: string, course: { code: string, title: string, summary: string }
  startsOn: string, endsOn: string, weeks: number, pattern: string
  places: number, placesLeft: number, waiting: number, open: boolean
  price: Money, deposit: Money, balanceDueOn: string
  /** The refund table in plain words, a line a rule. */
  refundRules: { when: string, deposit: string, balance: string }[]
}
export interface CourseView { code: string, title: string, summary: string, modules: { number: number, title: string, outcome: string, lessons: string[] }[], cohorts: CohortOffer[] }

export const placeAskInput = z.object({ name: someText(120), email, note: cleanText(1000).default('') }).strict()
export type PlaceAskInput = z.infer<typeof placeAskInput>
/** The same answer whether or not the address was known or asked before. */
export interface PlaceAskAnswer { sentTo: string, freeNow: boolean }

/** What the mailed link shows. `doing` says what its holder may do next. */
export interface PlaceLinkView {
  cohort: CohortOffer
  name: string, email: string, state: PlaceState
  /** The school's clock when this was answered; what a wait is counted against. */
  now: string
  /** Turn on the waiting list, 1 is next; null when not on it. */
  turn: number | null
  heldUntil: string | null
  doing: 'open' | 'pay-deposit' | 'wait' | 'pay-balance' | 'nothing'
  paid: Money, due: Money | null, balanceDueOn: string
  /** A payment the processor has not told us of yet. */
  payingSince: string | null
  receipts: { number: string, amount: Money, at: string, url: string }[]
  /** What cancelling today would give back, in words. */
  refundToday: { wording: string, sum: string, back: Money } | null
  hasAccount: boolean
}
/** A place as its signed-in person sees it; `link` opens its own page. */
export interface OwnPlaceView extends PlaceLinkView { link: string }
export const payInput = z.object({ purpose: z.enum(['deposit', 'balance', 'renewal']) }).strict()
export interface PayAnswer { url: string }

// the office
export interface CohortRow { code: string, name: string, startsOn: string, endsOn: string, pattern: string, places: number, taken: number, waiting: number, open: boolean, price: Money, deposit: Money }
export const cohortInput = z.object({ code: z.string().regex(/^[A-Z]{3}-\d{2}$/, 'three letters, a dash and the year: CIN-26'), name: someText(80), startsOn: date, endsOn: date, pattern: someText(300), places: z.number().int().min(1).max(60), priceMinor: z.number().int().min(0).max(10_000_000), depositMinor: z.number().int().min(0).max(10_000_000), open: z.boolean() }).strict()
export type CohortInput = z.infer<typeof cohortInput>
export const cohortChange = cohortInput.omit({ code: true }).partial().strict()
export type CohortChange = z.infer<typeof cohortChange>

export interface PlaceRow { id: string, cohort: { code: string, name: string }, name: string, email: string, state: PlaceState, slot: number | null, listNumber: number | null, askedAt: string | null, heldUntil: string | null, paid: Money, due: Money | null, sponsor: string | null }
export interface PlaceView extends PlaceRow {
  person: { id: string, name: string } | null
  note: string
  history: { at: string, what: string, by: string | null }[]
  ledger: { id: string, at: string, kind: string, purpose: string, amount: Money, reference: string, receipt: string | null }[]
  refunds: { id: string, amount: Money, rule: string, wording: string, sum: string, state: 'decided' | 'sent' | 'refused', problem: string | null, decidedAt: string }[]
  order: { number: string, sponsor: string, amount: Money, dueAt: string } | null
  movedFrom: { cohort: string, id: string } | null
  /** Steps of handbook 5.4 this place may take now. */
  steps: PlaceStep[]
}
export const placeSteps = ['offer', 'withdraw-offer', 'here', 'finish'] as const
export type PlaceStep = (typeof placeSteps)[number]
export const placeStepInput = z.object({ step: z.enum(placeSteps), note: cleanText(500).default('') }).strict()
export type PlaceStepInput = z.infer<typeof placeStepInput>
export const cancelCauses = ['student', 'school', 'illness', 'unsafe-work'] as const
export type CancelCause = (typeof cancelCauses)[number]
export const refundQuery = z.object({ cause: z.enum(cancelCauses).default('student'), on: date.optional() })
/** `seenMinor` is the sum that was shown: another sum by now is refused, nothing happens unseen. */
export const cancelInput = z.object({ cause: z.enum(cancelCauses), seenMinor: z.number().int().min(0), note: cleanText(500).default('') }).strict()
export type CancelInput = z.infer<typeof cancelInput>
export const moveInput = z.object({ to: z.string().regex(/^[A-Z0-9-]{3,20}$/), cause: z.enum(cancelCauses).default('student'), note: cleanText(500).default('') }).strict()
export type MoveInput = z.infer<typeof moveInput>
export interface SponsorView { id: string, organisation: string, contact: string, email: string }
export const orderInput = z.object({ organisation: someText(160), contact: someText(120), email, number: someText(60), amountMinor: z.number().int().min(1).max(10_000_000) }).strict()
export type OrderInput = z.infer<typeof orderInput>
export const bankInput = z.object({ purpose: z.enum(['deposit', 'balance']), amountMinor: z.number().int().min(1).max(10_000_000), reference: someText(120), on: date }).strict()
export type BankInput = z.infer<typeof bankInput>
export const handRefundInput = z.object({ amountMinor: z.number().int().min(1).max(10_000_000), reason: someText(500) }).strict()

export const placesQuery = z.object({ search: cleanText(100).optional(), cohort: cleanText(20).optional(), state: cleanText(20).optional(), sort: z.enum(['name', 'asked', 'slot']).default('asked'), after: z.string().max(400).optional(), limit: z.coerce.number().int().min(1).max(100).default(25) })
export type PlacesQuery = z.infer<typeof placesQuery>

export const rosterInput = z.object({ csv: cleanText(500_000) }).strict()
/** Every row of a list as it would be taken: nothing is kept by a preview. */
export interface RosterPreview { rows: { line: number, name: string, email: string, sponsor: string, problems: string[] }[], good: number, bad: number, free: number, seen: string }
export const rosterTakeInput = rosterInput.extend({ seen: z.string().length(64) }).strict()
export type RosterTakeInput = z.infer<typeof rosterTakeInput>
export interface CohortListView { cohort: CohortRow, people: { slot: number | null, name: string, email: string, state: PlaceState, head: string | null, consent: boolean, clearances: string[] }[], waiting: { turn: number, name: string, askedAt: string | null }[] }
