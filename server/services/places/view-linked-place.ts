import type { EntityManager } from '@mikro-orm/postgresql'
import { Payment } from '#server/db/entities/Payment'
import { PurchaseOrder } from '#server/db/entities/Sponsor'
import { quoteRefund } from '#server/services/money/quote-refund'
import { receiptNumber } from '#shared/contract/receipt-number'
import type { App } from '#server/utils/app'
import type { PlaceLinkView } from '#shared/contract/places'
import { countPlaces } from './count-places'
import { findLinkedPlace, type LinkedPlace } from './find-linked-place'
import { turnOf } from './list-turn'
import { dueMinor, nothingPaid, placeMoney } from './place-money'
import { placeToken } from './place-link'
import { receiptsOfPlace } from './receipts-of-place'
import { toOffer } from './view-offer'
import { balanceDueOn } from '#shared/domain/money/balance-due-on'
import { schoolDay } from '#shared/contract/school-day'

/** What the mailed link shows to whoever has it. Looking changes nothing. @throws {Refusal} place_link_unknown */
export async function viewLinkedPlace(em: EntityManager, app: App, token: string): Promise<PlaceLinkView> {
  return toLinkView(em, app, await findLinkedPlace(em, app, token))
}

/** A place as its own person sees it. Its cohort and course are loaded. */
export async function toLinkView(em: EntityManager, app: App, place: LinkedPlace): Promise<PlaceLinkView> {
  const cohort = place.cohort.$
  const now = app.clock.schoolNow()
  const amount = (minor: number) => ({ minor, currency: cohort.currency })
  const paid = (await placeMoney(em, [place.id])).get(place.id) ?? nothingPaid
  // Of an ordered place the sponsor pays the rest.
  const ordered = await em.count(PurchaseOrder, { place: place.id }) > 0
  const due = ordered ? null : dueMinor(place.state, cohort, paid)
  const open = await em.findOne(Payment, { place: place.id, state: { $in: ['begun', 'open'] } }, { orderBy: { createdAt: 'desc' } })
  const booked = place.state === 'deposit-paid' || place.state === 'confirmed'
  const quote = booked && paid.paidMinor > 0 ? await quoteRefund(em, app, place, { cause: 'student' }) : null
  const receipts = await receiptsOfPlace(em, place)
  return {
    cohort: toOffer(app, cohort, (await countPlaces(em, [cohort.id])).get(cohort.id)),
    name: place.name, email: place.email, state: place.state,
    now: now.toISOString(),
    turn: await turnOf(em, place),
    heldUntil: place.heldUntil?.toISOString() ?? null,
    doing: whatNext(place, due),
    paid: amount(paid.paidMinor), due: due === null ? null : amount(due),
    balanceDueOn: balanceDueOn(cohort.startsOn, place.depositPaidAt ? schoolDay(place.depositPaidAt) : null),
    payingSince: open?.createdAt.toISOString() ?? null,
    receipts: receipts.map(({ number, line, issuedAt }) => ({
      number: receiptNumber(number), amount: { minor: line.$.amountMinor, currency: line.$.currency }, at: issuedAt.toISOString(), url: `/api/place-links/${placeToken(app, place)}/receipts/${receiptNumber(number)}`,
    })),
    refundToday: quote && { wording: quote.wording, sum: quote.sum, back: quote.back },
    hasAccount: place.person !== null && place.person !== undefined,
  }
}

function whatNext({ state }: LinkedPlace, due: number | null): PlaceLinkView['doing'] {
  if (state === 'asked') return 'open'
  if (state === 'waiting-list') return 'wait'
  if (state === 'offered') return 'pay-deposit'
  return due !== null && (state === 'deposit-paid' || state === 'confirmed' || state === 'here') ? 'pay-balance' : 'nothing'
}
