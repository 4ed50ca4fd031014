import { moneyText, type Money } from '#shared/contract/money'
import type { Letter } from '../letter'
import { dateInWords } from '../school-words'

export interface PlaceMoved { first: string, from: string, to: string, startsOn: string, paid: Money, due: Money | null, dueOn: string, url: string }

/** A place was moved to another cohort, with what was paid for it. */
export function placeMoved({ first, from, to, startsOn, paid, due, dueOn, url }: PlaceMoved): Letter {
  return {
    subject: `Your place is now in ${to}`,
    paragraphs: [
      { text: `${first}, your place was moved from ${from} to ${to}, which starts ${dateInWords(startsOn)}. The ${moneyText(paid)} you paid came along${due === null ? '.' : `; the balance of ${moneyText(due)} falls due on ${dateInWords(dueOn)}.`}` },
      { text: 'A place is moved once. Earlier links to the old place show only that it was moved.' },
    ],
    action: { label: 'See the place', url },
    from: 'Corin Ashdown, Sallowbeck',
  }
}
