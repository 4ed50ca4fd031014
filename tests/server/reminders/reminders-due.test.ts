import { describe, expect, it } from 'vitest'
import { overdueSince, remindersDue, type ReminderCase } from '#server/services/reminders/reminders-due'
import { dayAfter } from '#shared/domain/money/calendar-days'

// Cinder starts 21 September 2026; its balance is due 28 days before, on 24 August (handbook 5.1, 5.4). Days of the messages: 5.5.
const place: ReminderCase = { state: 'deposit-paid', bookedOn: '2026-03-01', startsOn: '2026-09-21', balanceDueOn: '2026-08-24', dueMinor: 210_000, ordered: false, consent: 'none', consentSince: 1, accessUntil: null }
const due = (today: string, change: Partial<ReminderCase> = {}) => remindersDue({ ...place, ...change }, today)
const kinds = (today: string, change: Partial<ReminderCase> = {}) => due(today, change).map(one => `${one.kind} ${one.on}`)

describe('the balance', () => {
  it('is asked for 14 and 3 days before it is due, and late on the day after', () => {
    const all: Record<string, string[]> = {}
    for (let day = '2026-08-01'; day <= '2026-09-02'; day = dayAfter(day, 1)) {
      for (const one of kinds(day)) all[one] = [...all[one] ?? [], day]
    }
    expect(Object.fromEntries(Object.entries(all).map(([one, days]) => [one, [days[0], days.at(-1)]]))).toEqual({
      'balance-due 2026-08-10': ['2026-08-10', '2026-08-20'],
      'balance-due 2026-08-21': ['2026-08-21', '2026-08-24'],
      'balance-late 2026-08-24': ['2026-08-25', '2026-08-29'],
    })
    expect(due('2026-08-10')[0]).toMatchObject({ inDays: 14 })
    expect(due('2026-08-24')[0]).toMatchObject({ inDays: 0 })
  })
  it('is told late one day after, with five more days', () => {
    expect(due('2026-08-25')).toEqual([{ kind: 'balance-late', on: '2026-08-24', daysLate: 1, heldUntil: '2026-08-30' }])
  })
  it('puts the place on the office\'s list on the sixth day, and takes nothing away', () => {
    expect(overdueSince(place, '2026-08-29')).toBe(null)
    expect(overdueSince(place, '2026-08-30')).toBe('2026-08-30')
    expect(overdueSince({ ...place, dueMinor: 0 }, '2026-09-10')).toBe(null)
  })
  it('is not asked of who paid, whose sponsor pays, or whose place is not theirs', () => {
    expect(kinds('2026-08-25', { dueMinor: 0 })).toEqual([])
    expect(kinds('2026-08-25', { ordered: true })).toEqual([])
    for (const state of ['asked', 'offered', 'waiting-list', 'moved', 'cancelled', 'stopped'] as const) expect(kinds('2026-08-25', { state }), state).toEqual([])
  })
  it('falls due on the day of a later booking, and is not asked for before', () => {
    const booked = { bookedOn: '2026-09-01', balanceDueOn: '2026-09-01' }
    expect(kinds('2026-09-01', booked)).toEqual([])
    expect(due('2026-09-02', booked)).toEqual([{ kind: 'balance-late', on: '2026-09-01', daysLate: 1, heldUntil: '2026-09-07' }])
    expect(overdueSince({ ...place, ...booked }, '2026-09-06')).toBe(null)
    // Booked between the two: the earlier one is not sent after the fact.
    expect(kinds('2026-08-16', { bookedOn: '2026-08-15' })).toEqual([])
    expect(kinds('2026-08-21', { bookedOn: '2026-08-15' })).toEqual(['balance-due 2026-08-21'])
  })
})

describe('the safety form', () => {
  const paid = { dueMinor: 0 }
  it('is asked for 14 and 3 days before the start and on the first day', () => {
    const first = (day: string) => kinds(day, paid).filter(one => one.startsWith('safety'))
    expect(first('2026-09-06')).toEqual([])
    expect(first('2026-09-07')).toEqual(['safety-form-not-done 2026-09-07'])
    expect(first('2026-09-17')).toEqual(['safety-form-not-done 2026-09-07'])
    expect(first('2026-09-18')).toEqual(['safety-form-not-done 2026-09-18'])
    expect(first('2026-09-21')).toEqual(['safety-form-not-done 2026-09-21'])
    expect(first('2026-09-22')).toEqual([])
  })
  it('is not asked of who signed, and asked once more when a safety clause changed, whatever the day', () => {
    expect(kinds('2026-09-07', { ...paid, consent: 'signed' })).toEqual([])
    expect(kinds('2026-10-20', { ...paid, state: 'here', consent: 'asked again', consentSince: 3 })).toEqual(['safety-form-not-done v3'])
    expect(kinds('2026-10-20', { ...paid, state: 'finished', consent: 'asked again', consentSince: 3 })).toEqual([])
  })
})

describe('the welcome and the end of access', () => {
  const signed = { dueMinor: 0, consent: 'signed' as const }
  it('welcomes three days before the start, and who booked later all the same', () => {
    expect(kinds('2026-09-17', signed)).toEqual([])
    expect(kinds('2026-09-18', signed)).toEqual(['welcome 2026-09-21'])
    expect(kinds('2026-09-20', { ...signed, bookedOn: '2026-09-20' })).toEqual(['welcome 2026-09-21'])
    expect(kinds('2026-09-22', signed)).toEqual([])
  })
  it('warns thirty days before the lessons close, and again a year later when they were kept open', () => {
    const alumni = { ...signed, state: 'finished' as const, accessUntil: '2028-12-18' }
    expect(kinds('2028-11-17', alumni)).toEqual([])
    expect(kinds('2028-11-18', alumni)).toEqual(['alumni-ending 2028-12-18'])
    expect(kinds('2028-12-19', alumni)).toEqual([])
    expect(kinds('2029-11-18', { ...alumni, accessUntil: '2029-12-18' })).toEqual(['alumni-ending 2029-12-18'])
  })
})
