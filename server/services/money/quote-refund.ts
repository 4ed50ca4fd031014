import type { EntityManager } from '@mikro-orm/postgresql'
import { BenchPlace } from '#server/db/entities/BenchPlace'
import { Cohort } from '#server/db/entities/Cohort'
import type { App } from '#server/utils/app'
import type { RefundQuote } from '#shared/contract/money'
import type { CancelCause } from '#shared/contract/places'
import { schoolDay } from '#shared/contract/school-day'
import { courseWeeks, weeksBegun } from '#shared/domain/money/course-weeks'
import { refundDue } from '#shared/domain/money/refund-due'
import { moneyOfPlace } from './money-of-place'
import { splitRefund } from './split-refund'

/**
 * What giving up a place on a day would give back, by which rule, to which cards. Changes nothing.
 *
 * The place counts as filled when somebody waits for one in the cohort.
 *
 * @param on the day, "2026-09-21"; the school's today unless said
 */
export async function quoteRefund(em: EntityManager, app: Pick<App, 'clock'>, place: Pick<BenchPlace, 'id'>, { cause, on }: { cause: CancelCause, on?: string }): Promise<RefundQuote> {
  const { cohort, movedFromId } = await em.findOneOrFail(BenchPlace, { id: place.id })
  const { id: cohortId, startsOn, endsOn, currency } = await em.findOneOrFail(Cohort, { id: cohort.id })
  const movedFrom = movedFromId ? await em.findOneOrFail(BenchPlace, { id: movedFromId }) : null
  const money = await moneyOfPlace(em, place.id)
  const waiting = await em.count(BenchPlace, { cohort: cohortId, state: 'waiting-list' })
  const cancelledOn = on ?? schoolDay(app.clock.schoolNow())
  const weeks = courseWeeks(startsOn, endsOn)
  // More may have gone back by hand than was paid under one purpose; of that nothing is left to give.
  const paidDepositMinor = Math.max(0, money.held.deposit)
  const paidBalanceMinor = Math.max(0, money.held.balance)
  const due = refundDue({
    paidDepositMinor, paidBalanceMinor, startsOn, cancelledOn, cause, weeks,
    depositPaidOn: money.depositPaidAt && schoolDay(money.depositPaidAt),
    moveUsed: movedFrom !== null && movedFrom.endedBecause !== 'school',
    placeFilled: waiting > 0,
    weeksUsed: weeksBegun(startsOn, cancelledOn, weeks),
  })
  const amount = (minor: number) => ({ minor, currency })
  return {
    rule: due.rule,
    wording: due.wording,
    sum: due.sum,
    deposit: { paid: amount(paidDepositMinor), back: amount(due.depositBackMinor) },
    balance: { paid: amount(paidBalanceMinor), back: amount(due.balanceBackMinor) },
    back: amount(due.depositBackMinor + due.balanceBackMinor),
    mayMove: due.mayMove,
    parts: [...splitRefund(money, 'deposit', due.depositBackMinor), ...splitRefund(money, 'balance', due.balanceBackMinor)]
      .map(({ paymentId, purpose, amountMinor }) => ({ paymentId, purpose, amount: amount(amountMinor) })),
  }
}
