import { moneyText, type Money } from '#shared/contract/money'

/** How money moved, as the office says it. */
export const kindWords: Record<string, string> = {
  'card': 'Paid by card',
  'bank': 'Paid by bank',
  'card-refund': 'Given back to the card',
  'bank-refund': 'Given back by bank',
  'moved-in': 'Moved here with its place',
  'moved-out': 'Moved on with its place',
}

/** An amount with a minus that is one. */
export const signedMoney = (money: Money): string => moneyText(money).replace('-', '−')

