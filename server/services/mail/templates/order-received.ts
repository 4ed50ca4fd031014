import { moneyText, type Money } from '#shared/contract/money'
import type { Letter } from '../letter'
import { dateInWords } from '../school-words'

export interface OrderReceived { contact: string, student: string, cohort: string, startsOn: string, number: string, amount: Money, dueOn: string, rulesUrl: string }

/** To a sponsor: the order is here and the place is held from it. */
export function orderReceived({ contact, student, cohort, startsOn, number, amount, dueOn, rulesUrl }: OrderReceived): Letter {
  return {
    subject: `Your order ${number}: a place is held for ${student}`,
    paragraphs: [
      { text: `Hello ${contact}, thank you for order ${number} over ${moneyText(amount)}. From today it holds a place for ${student} in ${cohort}, which starts ${dateInWords(startsOn)}. Please pay by ${dateInWords(dueOn)} and give the order's number with it.` },
      { text: 'What the price covers, and when money comes back, stands on the page of the cohort.' },
    ],
    action: { label: 'What it covers', url: rulesUrl },
    from: 'Corin Ashdown, Sallowbeck',
  }
}
