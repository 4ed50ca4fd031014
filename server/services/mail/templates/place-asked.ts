import type { Letter } from '../letter'
import { dateInWords } from '../school-words'

/** Answer to an ask: the place is held once this is opened, so that nobody holds one with an address that is not theirs. */
export function placeAsked({ first, cohort, startsOn, url }: { first: string, cohort: string, startsOn: string, url: string }): Letter {
  return {
    subject: `${cohort}: open this to hold your place`,
    paragraphs: [
      { text: `Hello ${first}, you asked for a bench place in ${cohort}, which starts ${dateInWords(startsOn)}. Open the link and, if a place is free, it is held for you; you then have 30 minutes to begin paying the deposit. If none is free you take your turn on the waiting list.` },
      { text: 'If it was not you who asked, do nothing: nothing is held.' },
    ],
    action: { label: 'Hold my place', url },
    from: 'Sallowbeck School of Head Work',
  }
}
