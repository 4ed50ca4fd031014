import { moneyText, type Money } from '#shared/contract/money'
import { dayInWords } from '#shared/domain/money/calendar-days'
import type { Letter } from '../letter'

/** Message 17: access to the lessons ends. `until` is the last day they can be read. */
export function alumniEnding({ first, until, price, url }: { first: string, until: string, price: Money, url: string }): Letter {
  return {
    subject: `Your access ends ${dayInWords(until)}`,
    paragraphs: [{ text: `${first}, the lessons close on ${dayInWords(until)}; your own record never does. ${moneyText(price)} keeps them open a year.` }],
    action: { label: 'Keep them open a year', url },
    from: 'Corin Ashdown, Sallowbeck',
  }
}
