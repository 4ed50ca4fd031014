import type { RefundQuote } from '#shared/contract/money'
import type { CohortOffer, CohortRow, PlaceLinkView, PlaceView } from '#shared/contract/places'

const pounds = (minor: number) => ({ minor, currency: 'GBP' })

/** Cinder as in the school's scenario: 21 September to 18 December 2026, eight places, 2,450.00 of which 350.00 deposit. */
export const offer = (more: Partial<CohortOffer> = {}): CohortOffer => ({
  code: 'CIN-26', name: 'Cinder', course: { code: 'porting', title: 'Cylinder-head porting by hand', summary: 'Two heads, one record.' },
  startsOn: '2026-09-21', endsOn: '2026-12-18', weeks: 13, pattern: 'weeks 1, 4, 7, 10 and 13 on site', places: 8, placesLeft: 6, waiting: 0, open: true,
  price: pounds(245_000), deposit: pounds(35_000), balanceDueOn: '2026-08-24',
  refundRules: [{ when: 'Within 14 days of paying the deposit', deposit: 'all back', balance: 'all back' }], ...more,
})

export const linkView = (more: Partial<PlaceLinkView> = {}): PlaceLinkView => ({
  cohort: offer(), name: 'Orla Fenwick', email: 'orla@post.example', state: 'offered', now: '2026-03-26T19:40:00.000Z', turn: null, heldUntil: '2026-03-26T20:10:00.000Z', doing: 'pay-deposit',
  paid: pounds(0), due: pounds(35_000), balanceDueOn: '2026-08-24', payingSince: null, receipts: [], refundToday: null, hasAccount: false, ...more,
})

export const placeView = (more: Partial<PlaceView> = {}): PlaceView => ({
  id: '3f0e8a52-6f0f-4c52-9a0e-1b0a8f9a1c11', cohort: { code: 'BRM-25', name: 'Bramble' }, name: 'Agnes Wetherlam', email: 'agnes@sallowbeck.example', state: 'deposit-paid', slot: 6, listNumber: 6,
  askedAt: '2025-05-30T10:00:00.000Z', heldUntil: null, paid: pounds(35_000), due: pounds(210_000), sponsor: null, person: null, note: '', history: [], ledger: [], refunds: [], order: null, movedFrom: null, steps: [], ...more,
})

/** Agnes' worked example of handbook 5.4: 40 days before the start, 73 after paying; deposit kept or moved once. */
export const agnesQuote = (more: Partial<RefundQuote> = {}): RefundQuote => ({
  rule: 'days-28-to-55', wording: '28 to 55 days before the start: the deposit is kept, or moved once; the balance comes back.', sum: '350.00 paid - 350.00 kept = 0.00 back',
  deposit: { paid: pounds(35_000), back: pounds(0) }, balance: { paid: pounds(0), back: pounds(0) }, back: pounds(0), mayMove: true, parts: [], ...more,
})

export const cohortRow = (more: Partial<CohortRow> = {}): CohortRow => ({ code: 'CIN-26', name: 'Cinder', startsOn: '2026-09-21', endsOn: '2026-12-18', pattern: 'weeks 1 and 4', places: 8, taken: 2, waiting: 0, open: true, price: pounds(245_000), deposit: pounds(35_000), ...more })
