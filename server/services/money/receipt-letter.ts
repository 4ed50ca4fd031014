import { firstName } from '#server/services/mail/first-name'
import type { Letter } from '#server/services/mail/letter'
import { balanceReceived } from '#server/services/mail/templates/balance-received'
import { depositReceived } from '#server/services/mail/templates/deposit-received'
import { paymentGoesBack } from '#server/services/mail/templates/payment-goes-back'
import { renewalReceived } from '#server/services/mail/templates/renewal-received'
import { placeLink } from '#server/services/places/place-link'
import type { App } from '#server/utils/app'
import { moneyText } from '#shared/contract/money'
import { schoolDay } from '#shared/contract/school-day'
import { dayInWords } from '#shared/domain/money/calendar-days'
import type { Payer } from './payer-of'
import type { ReceiptFacts } from './receipt-facts'

/** The letter a receipt goes with, by what was paid. */
export function receiptLetter(app: Pick<App, 'config'>, facts: ReceiptFacts, payer: Payer): { template: string, letter: Letter } {
  const { line, cohort, place } = facts
  const money = (minor: number) => moneyText({ minor, currency: line.currency })
  const given = {
    first: firstName(payer.name),
    cohort: cohort.name,
    amount: money(line.amountMinor),
    receivedOn: dayInWords(facts.receivedOn),
    due: facts.dueMinor > 0 ? { amount: money(facts.dueMinor), by: dayInWords(facts.dueOn) } : null,
    url: placeLink(app, place),
  }
  if (facts.goesBack) return { template: 'payment-goes-back', letter: paymentGoesBack(given) }
  if (line.purpose === 'deposit') {
    return { template: 'deposit-received', letter: depositReceived({ ...given, freeUntil: facts.freeUntil && dayInWords(facts.freeUntil), formUrl: `${app.config.publicUrl}/safety-form` }) }
  }
  if (line.purpose === 'balance') return { template: 'balance-received', letter: balanceReceived(given) }
  return { template: 'renewal-received', letter: renewalReceived({ ...given, until: place.accessUntil ? dayInWords(schoolDay(place.accessUntil)) : null, shelfUrl: `${app.config.publicUrl}/shelf` }) }
}
