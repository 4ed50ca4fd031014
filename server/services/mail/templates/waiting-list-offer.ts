import type { Letter } from '../letter'
import { dateInWords, timeInWords } from '../school-words'

/** Message 6: a place has come free for somebody on the waiting list. */
export function waitingListOffer({ first, cohort, startsOn, until, url }: { first: string, cohort: string, startsOn: string, until: string, url: string }): Letter {
  return {
    subject: 'A place has come free',
    paragraphs: [{ text: `${first}, one place in ${cohort} (starts ${dateInWords(startsOn)}) opened. It is offered to you alone until ${timeInWords(until)}. If you pass, you keep your turn.` }],
    action: { label: 'Take the place, or pass', url },
    from: 'Corin Ashdown, Sallowbeck',
  }
}
