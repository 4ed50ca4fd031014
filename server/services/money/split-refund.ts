import type { PaymentPurpose } from '#server/db/entities/Payment'
import type { MoneyOfPlace } from './money-of-place'

export interface RefundPart {
  /** The card payment it goes back to; null when it goes by bank. */
  paymentId: string | null
  purpose: PaymentPurpose
  amountMinor: number
}

/** Splits an amount of one purpose over the cards that paid it, newest first; what no card paid goes by bank. */
export function splitRefund(money: Pick<MoneyOfPlace, 'cards'>, purpose: PaymentPurpose, amountMinor: number): RefundPart[] {
  const parts: RefundPart[] = []
  let rest = amountMinor
  for (const card of money.cards.filter(one => one.purpose === purpose)) {
    const part = Math.min(rest, card.leftMinor)
    if (part > 0) parts.push({ paymentId: card.paymentId, purpose, amountMinor: part })
    rest -= part
  }
  return rest > 0 ? [...parts, { paymentId: null, purpose, amountMinor: rest }] : parts
}
