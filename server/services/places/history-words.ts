import { moneyText } from '#shared/contract/money'
import type { PlaceAction } from './note-place'

const text = (value: unknown): string => typeof value === 'string' || typeof value === 'number' ? String(value) : ''

const words: Record<PlaceAction, (detail: Record<string, unknown>) => string> = {
  'place-asked': ({ number }) => `Asked for a place, number ${text(number)} on the list`,
  'place-opened': () => 'Opened the mailed link',
  'place-listed': () => 'No place was free: waits on the list',
  'place-offered': ({ slot, minutes }) => `Bench place ${text(slot)} held for ${Number(minutes) < 120 ? `${text(minutes)} minutes` : `${Number(minutes) / 60} hours`}`,
  'place-pay-begun': () => 'Began to pay the deposit; held for 48 hours',
  'place-offer-lapsed': () => 'The hold ran out; back on the list',
  'place-offer-passed': () => 'Let the offer go; keeps the turn',
  'place-offer-withdrawn': () => 'Offer withdrawn; back on the list',
  'place-deposit-paid': () => 'Deposit paid',
  'place-retaken': ({ slot }) => `Paid after the hold ran out; bench place ${text(slot)} was still free`,
  'place-confirmed': () => 'Paid in full: confirmed',
  'place-order-taken': ({ order }) => `Purchase order ${text(order)} taken: confirmed`,
  'place-here': () => 'Here',
  'place-finished': () => 'Finished',
  'place-cancelled': ({ cause }) => `Cancelled (${causeWords(cause)})`,
  'place-stopped': ({ cause }) => `Stopped (${causeWords(cause)})`,
  'place-moved-away': ({ to }) => `Moved to ${text(to)}`,
  'place-moved-here': ({ from }) => `Moved here from ${text(from)}`,
  'place-from-roster': () => 'Taken from a list',
  'place-overdue': () => 'The balance is late: on the list of the office',
  'place-bank-payment': ({ minor, currency }) => `Bank payment of ${moneyText({ minor: Number(minor), currency: text(currency) })} written down`,
}

function causeWords(cause: unknown): string {
  return { 'student': 'by the student', 'school': 'by the school', 'illness': 'illness or bereavement', 'unsafe-work': 'repeated unsafe work', 'not-paid': 'not paid' }[text(cause)] ?? text(cause)
}

/** What happened to a place, in words for the office. */
export function historyWords(action: string, detail: Record<string, unknown>): string {
  const known = words[action as PlaceAction] as ((detail: Record<string, unknown>) => string) | undefined
  if (known) return known(detail)
  if (action === 'refund-decided') return `Refund of ${moneyText({ minor: Number(detail.amountMinor), currency: text(detail.currency) })} decided`
  return action.replaceAll('-', ' ').replace(/^./, letter => letter.toUpperCase())
}
