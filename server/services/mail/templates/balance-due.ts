import { moneyText, type Money } from '#shared/contract/money'
import type { Letter } from '../letter'
import { dateInWords } from '../school-words'

/** Message 4: the balance falls due. */
export function balanceDue({ first, due, dueOn, inDays, url }: { first: string, due: Money, dueOn: string, inDays: number, url: string }): Letter {
  return {
    subject: `Balance ${moneyText(due)}, due ${dateInWords(dueOn)}`,
    paragraphs: [{ text: `${first}, this falls due ${inDays === 0 ? 'today' : inDays === 1 ? 'tomorrow' : `in ${inDays} days`}. If money is the trouble tell me now; I can usually do two parts.` }],
    action: { label: `Pay the ${moneyText(due)} balance`, url },
    from: 'Corin Ashdown, Sallowbeck',
  }
}
