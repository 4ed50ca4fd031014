import type { PlaceState } from '#shared/contract/places'

/** The state of a place in plain words. Shapes belong to the criteria. */
export const placeStateWords: Record<PlaceState, string> = {
  'asked': 'asked',
  'offered': 'offered',
  'deposit-paid': 'deposit paid',
  'confirmed': 'confirmed',
  'here': 'here',
  'finished': 'finished',
  'waiting-list': 'waiting list',
  'moved': 'moved',
  'cancelled': 'cancelled',
  'stopped': 'stopped',
}

/** States that take one of the cohort's bench places (handbook 5.4). */
export const takesBench = (state: PlaceState) => state === 'offered' || state === 'deposit-paid' || state === 'confirmed' || state === 'here'

/** How loud the word is: taken places in the layout's blue, ended ones outlined, the rest plain. */
export function placeTone(state: PlaceState): 'plain' | 'layout' | 'outline' {
  if (takesBench(state)) return 'layout'
  return state === 'moved' || state === 'cancelled' || state === 'stopped' ? 'outline' : 'plain'
}

/** What kind of line stands in the ledger, as the office says it. */
export function ledgerWords(kind: string, purpose: string): string {
  const kinds: Record<string, string> = { 'card': 'by card', 'bank': 'by bank', 'card-refund': 'given back to the card', 'bank-refund': 'given back by bank', 'moved-in': 'moved here', 'moved-out': 'moved on' }
  const what = purpose.charAt(0).toUpperCase() + purpose.slice(1).replaceAll('-', ' ')
  return `${what} ${kinds[kind] ?? kind.replaceAll('-', ' ')}`
}
