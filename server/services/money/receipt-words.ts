import type { ReceiptPaper } from '#server/adapters/paper/receipt-paper'
import { dateInWords } from '#server/services/mail/school-words'
import type { SchoolDetails } from '#server/services/school/school-details'
import { moneyText } from '#shared/contract/money'
import { receiptNumber } from '#shared/contract/receipt-number'
import { dayInWords } from '#shared/domain/money/calendar-days'
import type { ReceiptFacts } from './receipt-facts'

/** What stands on the paper. */
export function receiptWords(school: SchoolDetails, facts: ReceiptFacts): ReceiptPaper {
  const { receipt, line, cohort, payer } = facts
  const money = (minor: number) => moneyText({ minor, currency: line.currency })
  const course = `${cohort.name} (${cohort.code}), ${dayInWords(cohort.startsOn)} to ${dayInWords(cohort.endsOn)}`
  const renewal = line.purpose === 'renewal'
  return {
    number: receiptNumber(receipt.number),
    school,
    from: payer?.name || 'a student of the school',
    receivedOn: dateInWords(facts.receivedOn),
    what: renewal ? `A further year of the lessons of ${course}.` : `${line.purpose === 'deposit' ? 'Deposit' : 'Balance'} for a bench place in ${course}.`,
    how: line.kind === 'card' ? 'by card' : `by bank transfer, reference ${line.reference}`,
    amount: money(line.amountMinor),
    sums: renewal || facts.goesBack
      ? []
      : [
          { label: 'Price of the place', amount: money(cohort.priceMinor) },
          { label: 'Paid before', amount: money(facts.beforeMinor) },
          { label: facts.dueMinor > 0 ? `Still to pay, by ${dayInWords(facts.dueOn)}` : 'Still to pay', amount: money(facts.dueMinor) },
        ],
    notes: notesOf(facts),
    issuedAt: receipt.issuedAt,
  }
}

function notesOf({ line, freeUntil, goesBack }: ReceiptFacts): string[] {
  if (goesBack) return ['All of this goes back to you; a message says why.']
  if (line.purpose !== 'deposit') return []
  return [`The deposit counts toward the price.${freeUntil ? ` Until ${dayInWords(freeUntil)} you may cancel for a full refund.` : ''}`]
}
