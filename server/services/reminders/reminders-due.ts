import type { PlaceState } from '#server/db/entities/BenchPlace'
import { dayAfter, daysBetween } from '#shared/domain/money/calendar-days'
import type { ConsentState } from '#shared/contract/safety'

/** What reminders of a place follow from. Days are YYYY-MM-DD of the school's calendar. */
export interface ReminderCase {
  state: PlaceState
  /** When the place became theirs: nobody is reminded of what fell due before. */
  bookedOn: string
  startsOn: string
  /** The day the balance is asked for: the day it was booked, where that is later than the usual one. */
  balanceDueOn: string
  /** Still to be paid, minor units; 0 when nothing is. */
  dueMinor: number
  /** A sponsor pays. */
  ordered: boolean
  consent: ConsentState
  /** Version of the safety form since which signatures stand. */
  consentSince: number
  /** Last day a finished student may read the lessons. */
  accessUntil: string | null
}

/** `on` is the day it belongs to; with the kind it says the message once. */
export type Reminder
  = { kind: 'safety-form-not-done', on: string }
    | { kind: 'balance-due', on: string, inDays: number }
    | { kind: 'balance-late', on: string, daysLate: number, heldUntil: string }
    | { kind: 'welcome', on: string }
    | { kind: 'alumni-ending', on: string }

/** Days before the day it is about that a reminder goes: school design values, as the handbook's messages 3 to 5, 7 and 17 have them. */
const before = { form: [14, 3, 0], balance: [14, 3], welcome: 3, access: 30 } as const
/** Days a place is held once the student was told that the balance is late. */
export const graceDays = 5

/**
 * Reminders of a place that belong to a day. Each stays due until the next of its kind takes over, so that a worker that was down for
 * a day leaves nobody without; written under `kind:place:on`, each goes once.
 *
 * Source: handbook 5.4 and 5.5.
 */
export function remindersDue(place: ReminderCase, today: string): Reminder[] {
  return [safetyForm(place, today), ...balance(place, today), welcome(place, today), access(place, today)].filter(one => one !== null)
}

/** Since when a place is on the office's list for a late balance, or null: the sixth day. Nothing is taken away by that. */
export function overdueSince(place: Pick<ReminderCase, 'state' | 'balanceDueOn' | 'dueMinor' | 'ordered'>, today: string): string | null {
  if (!owes(place)) return null
  const since = dayAfter(place.balanceDueOn, graceDays + 1)
  return today >= since ? since : null
}

const owes = (place: Pick<ReminderCase, 'state' | 'dueMinor' | 'ordered'>) => place.state === 'deposit-paid' && place.dueMinor > 0 && !place.ordered

function safetyForm(place: ReminderCase, today: string): Reminder | null {
  const coming = ['deposit-paid', 'confirmed', 'here'].includes(place.state)
  if (!coming || place.consent === 'signed') return null
  if (place.consent === 'asked again') return { kind: 'safety-form-not-done', on: `v${place.consentSince}` }
  const on = newestOf(before.form, place.startsOn, today)
  return on !== null && today <= place.startsOn && place.bookedOn < on ? { kind: 'safety-form-not-done', on } : null
}

function balance(place: ReminderCase, today: string): Reminder[] {
  if (!owes(place)) return []
  const due = place.balanceDueOn
  const daysLate = daysBetween(due, today)
  if (daysLate >= 1 && daysLate <= graceDays) return [{ kind: 'balance-late', on: due, daysLate, heldUntil: dayAfter(due, graceDays + 1) }]
  if (daysLate > 0) return []
  const on = newestOf(before.balance, due, today)
  return on !== null && place.bookedOn < on ? [{ kind: 'balance-due', on, inDays: daysBetween(today, due) }] : []
}

/** Whoever booked late needs to know what to bring all the same. */
function welcome(place: ReminderCase, today: string): Reminder | null {
  const coming = ['deposit-paid', 'confirmed', 'here'].includes(place.state)
  return coming && today >= dayAfter(place.startsOn, -before.welcome) && today <= place.startsOn ? { kind: 'welcome', on: place.startsOn } : null
}

function access(place: ReminderCase, today: string): Reminder | null {
  const { accessUntil } = place
  if (place.state !== 'finished' || accessUntil === null) return null
  return today >= dayAfter(accessUntil, -before.access) && today <= accessUntil ? { kind: 'alumni-ending', on: accessUntil } : null
}

/** The last of some days before another that has come; null before the first. */
function newestOf(days: readonly number[], of: string, today: string): string | null {
  return days.map(count => dayAfter(of, -count)).filter(day => day <= today).at(-1) ?? null
}
