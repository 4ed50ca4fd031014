import { moneyText, type Money } from '#shared/contract/money'
import type { Letter } from '../letter'
import { dateInWords, timeInWords } from '../school-words'

export interface PlaceHeld { first: string, cohort: string, startsOn: string, until: string, deposit: Money, url: string, rulesUrl: string }

/** Message 1: a place is held for 48 hours. */
export function placeHeld({ first, cohort, startsOn, until, deposit, url, rulesUrl }: PlaceHeld): Letter {
  return {
    subject: `A bench place is held for you until ${timeInWords(until)}`,
    paragraphs: [
      { text: `Hello ${first}, a place in ${cohort} (starts ${dateInWords(startsOn)}) is yours until ${timeInWords(until)}. After that the place goes to the next person on the list.` },
      { text: `Read first what the deposit covers and when it comes back: ${rulesUrl}` },
      { text: 'Questions: reply, Corin reads these.' },
    ],
    action: { label: `Pay the ${moneyText(deposit)} deposit`, url },
    from: 'Corin Ashdown, Sallowbeck',
  }
}
