/** Rows of the school's refund table, in its order: the first that fits is the rule. */
export type RefundRuleCode = 'within-14-days' | '56-days' | '28-days' | '7-days' | 'under-7-days' | 'school' | 'unsafe-work'

export interface RefundRule {
  code: RefundRuleCode
  /** When it is the rule. */
  when: string
  /** What becomes of the deposit, and of the balance. */
  deposit: string
  balance: string
}

/** Days after paying the deposit, that day not counted, in which everything comes back. */
export const coolingDays = 14
/** What a student who cancels early leaves with the school: 25.00, in minor units. */
export const earlyCancelFeeMinor = 2500

/** The table. What people read and what is reckoned (`refundDue`) are both made from it. Source: handbook 5.4. */
export const refundRules: readonly RefundRule[] = [
  { code: 'within-14-days', when: 'within 14 days of paying the deposit, course not begun', deposit: 'all back', balance: 'all back' },
  { code: '56-days', when: '56 days or more before the start', deposit: 'back less 25.00', balance: 'all back' },
  { code: '28-days', when: '28 to 55 days before the start', deposit: 'kept, or moved once to another cohort', balance: 'all back' },
  { code: '7-days', when: '7 to 27 days before the start', deposit: 'kept', balance: 'half back, or all moved once if somebody else takes the place' },
  { code: 'under-7-days', when: 'under 7 days before the start, or after it', deposit: 'kept', balance: 'none back; with illness or bereavement, all moved once' },
  { code: 'school', when: 'the school cancels, or moves the course by more than 7 days', deposit: 'all back', balance: 'all back' },
  { code: 'unsafe-work', when: 'stopped for repeated unsafe work after a written warning', deposit: 'kept', balance: 'unused weeks back, less 20 %' },
]

/** Stands under the table and in every wording. */
export const consumerLaw = 'Where local consumer law gives more, the law applies.'

/** @throws {RangeError} for a code that has no row */
export function refundRule(code: RefundRuleCode): RefundRule {
  const rule = refundRules.find(one => one.code === code)
  if (!rule) throw new RangeError(`the refund table has no row "${code}"`)
  return rule
}
