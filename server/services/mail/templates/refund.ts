import type { Letter } from '../letter'

export interface RefundWent {
  first: string
  cohort: string
  amount: string
  /** When the place was given up, and how many days before the start; negative after it. Null when it still stands. */
  cancelled: { on: string, daysBefore: number } | null
  /** By the table's rule, by a person's own decision, or because the place was gone when the payment came. */
  why: 'rule' | 'hand' | 'place-gone'
  /** The rule, or the reason, as it was shown before it was decided. */
  rule: string
  sum: string
  by: 'card' | 'bank'
  url: string
}

/** Message 15: refund. */
export function refundWentLetter(given: RefundWent): Letter {
  const way = given.by === 'card' ? 'Paid to the card used, 5 to 10 days.' : 'Paid to your bank account, 1 to 3 days.'
  return {
    subject: `Your refund of ${given.amount}`,
    paragraphs: [
      { text: `${given.first}, ${opening(given)}` },
      { text: `${given.why === 'rule' ? 'Rule' : 'Why'}: ${ended(given.rule)}` },
      { text: `Sum: ${ended(given.sum)}`, strong: true },
      { text: `${way} If you think ${given.why === 'rule' ? 'the rule' : 'this'} is wrong, reply; a person looks.` },
    ],
    action: { label: 'See what was paid and went back', url: given.url },
    from: 'Corin Ashdown, Sallowbeck',
  }
}

function opening({ why, cohort, amount, cancelled }: RefundWent): string {
  if (why === 'place-gone') return `your payment came when the place in ${cohort} was gone. All of it goes back to you.`
  if (why === 'hand' || !cancelled) return `the school gives you ${amount} back for your place in ${cohort}.`
  return `your place in ${cohort} was cancelled on ${cancelled.on}, ${daysInWords(cancelled.daysBefore)}.`
}

function daysInWords(before: number): string {
  if (before === 0) return 'on the day of the start'
  const count = Math.abs(before) === 1 ? '1 day' : `${Math.abs(before)} days`
  return `${count} ${before > 0 ? 'before' : 'after'} the start`
}

function ended(text: string): string {
  return /[.!?]$/.test(text) ? text : `${text}.`
}
