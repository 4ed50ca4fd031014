import { daysBetween } from './calendar-days'
import { plainAmount } from './plain-amount'
import { consumerLaw, coolingDays, earlyCancelFeeMinor, refundRule, type RefundRuleCode } from './refund-rules'

export type RefundCause = 'student' | 'school' | 'illness' | 'unsafe-work'

export interface RefundCase {
  /** What the school holds of each, in minor units: paid and not yet given back. */
  paidDepositMinor: number
  paidBalanceMinor: number
  /** Days as "2026-09-21", in the school's zone. Null when no deposit was paid. */
  depositPaidOn: string | null
  startsOn: string
  cancelledOn: string
  /** `illness` is illness or bereavement, of the student. */
  cause: RefundCause
  /** The place came by a move: it was moved once already. */
  moveUsed: boolean
  /** Somebody else takes the place. */
  placeFilled: boolean
  /** Weeks of the course, and those that have begun. */
  weeks: number
  weeksUsed: number
}

export interface RefundDue {
  rule: RefundRuleCode
  /** The rule as people read it. */
  wording: string
  /** The sum written out: "350.00 paid - 25.00 kept = 325.00 back". */
  sum: string
  depositBackMinor: number
  balanceBackMinor: number
  /** Whether the student may move, once, with all the money, instead. */
  mayMove: boolean
}

/**
 * What goes back when somebody's place is given up, by which row of the refund table, and how that was reckoned.
 *
 * Days are days of the calendar: the start is day 0, and a day counts whole whatever its hour. The first day belongs to the course
 * that has begun. Rows are tried in the table's order and the first that fits is the rule. A penny that cannot be halved or shared
 * goes to the student. Moving instead is open wherever the table leaves the student something to move, as long as it was not used;
 * the school's own cancelling does not use it.
 *
 * Not included: what the law gives beyond the table, which the wording says.
 *
 * Units: whole minor units of one currency. Source: handbook 5.4.
 *
 * @throws {RangeError} for an amount that is not whole or is below zero, a day that is none, or weeks that cannot be
 * @example
 * refundDue({ paidDepositMinor: 35000, paidBalanceMinor: 0, depositPaidOn: '2025-06-01', startsOn: '2025-09-22', cancelledOn: '2025-08-13', cause: 'student', moveUsed: false, placeFilled: false, weeks: 13, weeksUsed: 0 })
 * // => rule '28-days', sum '350.00 paid - 350.00 kept = 0.00 back', mayMove true
 */
export function refundDue(given: RefundCase): RefundDue {
  const { paidDepositMinor: deposit, paidBalanceMinor: balance, weeks, weeksUsed } = given
  for (const amount of [deposit, balance]) if (!Number.isSafeInteger(amount) || amount < 0) throw new RangeError('refundDue requires whole amounts of minor units, not below zero')
  if (!Number.isInteger(weeks) || weeks < 1 || !Number.isInteger(weeksUsed) || weeksUsed < 0 || weeksUsed > weeks) throw new RangeError('refundDue requires whole weeks, used ones among them')

  const code = ruleOf(given)
  const row = refundRule(code)
  const depositBack = deposit - keptOfDeposit(code, deposit)
  const { back: balanceBack, reckoning } = balanceOf(code, balance, weeks, weeksUsed)

  return {
    rule: code,
    wording: `${row.when.charAt(0).toUpperCase()}${row.when.slice(1)}: deposit ${row.deposit}; balance ${row.balance}. ${consumerLaw}`,
    sum: sumOf(deposit, depositBack, balance, balanceBack, reckoning),
    depositBackMinor: depositBack,
    balanceBackMinor: balanceBack,
    mayMove: mayMove(code, given),
  }
}

function ruleOf({ cause, depositPaidOn, startsOn, cancelledOn }: RefundCase): RefundRuleCode {
  const before = daysBetween(cancelledOn, startsOn)
  const sincePaid = depositPaidOn === null ? null : daysBetween(depositPaidOn, cancelledOn)
  if (cause === 'school' || cause === 'unsafe-work') return cause
  if (sincePaid !== null && sincePaid <= coolingDays && before > 0) return 'within-14-days'
  if (before >= 56) return '56-days'
  if (before >= 28) return '28-days'
  return before >= 7 ? '7-days' : 'under-7-days'
}

function keptOfDeposit(code: RefundRuleCode, deposit: number): number {
  if (code === 'within-14-days' || code === 'school') return 0
  return code === '56-days' ? Math.min(earlyCancelFeeMinor, deposit) : deposit
}

function balanceOf(code: RefundRuleCode, balance: number, weeks: number, weeksUsed: number): { back: number, reckoning: string | null } {
  if (code === 'under-7-days') return { back: 0, reckoning: null }
  if (code === '7-days') return { back: Math.ceil(balance / 2), reckoning: null }
  if (code !== 'unsafe-work') return { back: balance, reckoning: null }
  const unused = weeks - weeksUsed
  // 80 % as 4/5: whole numbers until the one division, so that no rounding of binary fractions decides a penny.
  return { back: Math.ceil(balance * unused * 4 / (weeks * 5)), reckoning: `${plainAmount(balance)} paid x ${unused} of ${weeks} weeks unused, less 20 %` }
}

function sumOf(deposit: number, depositBack: number, balance: number, balanceBack: number, reckoning: string | null): string {
  const line = (paid: number, back: number) => `${plainAmount(paid)} paid - ${plainAmount(paid - back)} kept = ${plainAmount(back)} back`
  if (deposit + balance === 0) return 'Nothing was paid, so nothing goes back'
  if (balance === 0) return line(deposit, depositBack)
  const parts = [
    ...(deposit > 0 ? [`Deposit ${line(deposit, depositBack)}`] : []),
    `${deposit > 0 ? 'balance' : 'Balance'} ${reckoning ? `${reckoning} = ${plainAmount(balanceBack)} back` : line(balance, balanceBack)}`,
  ]
  return deposit > 0 ? `${parts.join('; ')}; together ${plainAmount(depositBack + balanceBack)} back` : parts.join('')
}

function mayMove(code: RefundRuleCode, { cause, moveUsed, placeFilled }: RefundCase): boolean {
  if (code === 'school') return true
  if (moveUsed || code === 'unsafe-work') return false
  if (code === '7-days') return placeFilled
  return code !== 'under-7-days' || cause === 'illness'
}
