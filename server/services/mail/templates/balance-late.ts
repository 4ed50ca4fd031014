import { moneyText, type Money } from '#shared/contract/money'
import type { Letter } from '../letter'
import { dateInWords } from '../school-words'

/** Message 5: the balance is late, and until when the place is held all the same. */
export function balanceLate({ first, due, daysLate, heldUntil, url }: { first: string, due: Money, daysLate: number, heldUntil: string, url: string }): Letter {
  return {
    subject: `Balance now ${daysLate} ${daysLate === 1 ? 'day' : 'days'} late`,
    paragraphs: [{ text: `${first}, we have not had ${moneyText(due)}. Your place is held until ${dateInWords(heldUntil)}. After that we must offer it. If you have paid, send me the reference and ignore this.` }],
    action: { label: `Pay the ${moneyText(due)} balance`, url },
    from: 'Corin Ashdown, Sallowbeck',
  }
}
