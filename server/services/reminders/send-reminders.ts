import { LockMode } from '@mikro-orm/core'
import type { EntityManager } from '@mikro-orm/postgresql'
import { AuditEvent } from '#server/db/entities/AuditEvent'
import { BenchPlace } from '#server/db/entities/BenchPlace'
import { SafetyNote } from '#server/db/entities/Consent'
import { Lesson } from '#server/db/entities/Lesson'
import { Mail } from '#server/db/entities/Mail'
import { PracticeHead } from '#server/db/entities/PracticeHead'
import { firstName } from '#server/services/mail/first-name'
import type { Letter } from '#server/services/mail/letter'
import { alumniEnding } from '#server/services/mail/templates/alumni-ending'
import { balanceDue } from '#server/services/mail/templates/balance-due'
import { balanceLate } from '#server/services/mail/templates/balance-late'
import { safetyFormNotDone } from '#server/services/mail/templates/safety-form-not-done'
import { welcome } from '#server/services/mail/templates/welcome'
import { writeMail } from '#server/services/mail/write-mail'
import { notePlace } from '#server/services/places/note-place'
import { placeLink } from '#server/services/places/place-link'
import type { App } from '#server/utils/app'
import { renewalMinor } from '#shared/contract/money'
import { schoolDay, schoolHour, startOfDay } from '#shared/contract/school-day'
import { loadReminderCases, type LoadedReminderCase } from './load-reminder-cases'
import { overdueSince, remindersDue, type Reminder } from './reminders-due'

/** Nobody is written to in the night. */
const firstHour = 8
/** Further ahead than any reminder of ending access goes out. */
const accessAheadMs = 60 * 24 * 3_600_000

export interface RemindersSent { written: number, listed: number }

/**
 * Writes every reminder that is due at an instant of the school's clock and was not written yet, and puts places whose balance is six
 * days late on the office's list. Each place is a transaction of its own, looked at again under its lock: what was paid or signed a
 * moment ago is not asked for. May run at any time and as often as one likes.
 *
 * @throws {AggregateError} with what went wrong, after every other place was seen to
 */
export async function sendReminders(app: App, now: Date): Promise<RemindersSent> {
  const sent: RemindersSent = { written: 0, listed: 0 }
  if (schoolHour(now) < firstHour) return sent
  const today = schoolDay(now)
  const faults: unknown[] = []
  for (const placeId of await placesToRemind(app.orm.em.fork(), now, today)) {
    try {
      const one = await app.orm.em.fork().transactional(tx => remind(tx, app, placeId, today))
      sent.written += one.written
      sent.listed += one.listed
    }
    catch (fault) {
      faults.push(fault)
    }
  }
  if (faults.length > 0) throw new AggregateError(faults, `${faults.length} of the reminders could not be written`)
  return sent
}

/** Places with something due that was not written or listed yet, as they look unlocked. Of those who finished, only whose access ends soon. */
async function placesToRemind(em: EntityManager, now: Date, today: string): Promise<string[]> {
  const cases = (await loadReminderCases(em, { $or: [
    { state: { $in: ['deposit-paid', 'confirmed', 'here'] } },
    { state: 'finished', accessUntil: { $gte: startOfDay(today), $lt: new Date(now.getTime() + accessAheadMs) } },
  ] })).map(({ place, of }) => ({ id: place.id, keys: remindersDue(of, today).map(one => keyOf(place.id, one)), late: overdueSince(of, today) !== null }))
  const written = new Set((await em.find(Mail, { key: { $in: cases.flatMap(one => one.keys) } }, { fields: ['key'] })).map(mail => mail.key))
  const listed = new Set((await em.find(AuditEvent, { action: 'place-overdue', subject: { $in: cases.filter(one => one.late).map(one => `place:${one.id}`) } }, { fields: ['subject'] })).map(event => event.subject))
  return cases.filter(one => one.keys.some(key => !written.has(key)) || (one.late && !listed.has(`place:${one.id}`))).map(one => one.id)
}

async function remind(tx: EntityManager, app: App, placeId: string, today: string): Promise<RemindersSent> {
  await tx.findOneOrFail(BenchPlace, placeId, { lockMode: LockMode.PESSIMISTIC_WRITE })
  const [found] = await loadReminderCases(tx, { id: placeId })
  if (!found) return { written: 0, listed: 0 }
  let written = 0
  for (const reminder of remindersDue(found.of, today)) {
    const key = keyOf(placeId, reminder)
    if (await tx.count(Mail, { key }) > 0) continue
    const { place } = found
    await writeMail(tx, app, { key, template: reminder.kind, to: { id: place.person?.id ?? null, email: place.person?.$.email ?? place.email }, letter: await letterOf(tx, app, found, reminder) })
    written += 1
  }
  const since = overdueSince(found.of, today)
  if (since === null || await tx.count(AuditEvent, { action: 'place-overdue', subject: `place:${placeId}` }) > 0) return { written, listed: 0 }
  notePlace(tx, found.place, 'job', 'place-overdue', { dueMinor: found.of.dueMinor, since })
  return { written, listed: 1 }
}

const keyOf = (placeId: string, { kind, on }: Reminder) => `${kind}:${placeId}:${on}`

async function letterOf(em: EntityManager, app: App, { place, of }: LoadedReminderCase, reminder: Reminder): Promise<Letter> {
  const cohort = place.cohort.$
  const first = firstName(place.person?.$.name ?? place.name)
  const due = { minor: of.dueMinor, currency: cohort.currency }
  switch (reminder.kind) {
    case 'safety-form-not-done': return safetyFormNotDone({ first, items: await itemsLeft(em, of, place.person?.id ?? null), url: `${app.config.publicUrl}/safety-form` })
    case 'balance-due': return balanceDue({ first, due, dueOn: of.balanceDueOn, inDays: reminder.inDays, url: placeLink(app, place) })
    case 'balance-late': return balanceLate({ first, due, daysLate: reminder.daysLate, heldUntil: reminder.heldUntil, url: placeLink(app, place) })
    case 'alumni-ending': return alumniEnding({ first, until: reminder.on, price: { minor: renewalMinor, currency: cohort.currency }, url: placeLink(app, place) })
    case 'welcome': {
      const [lesson] = await em.find(Lesson, {}, { orderBy: { number: 'asc' }, limit: 1 })
      const [head] = place.person ? await em.find(PracticeHead, { student: place.person.id, cohort: cohort.id }, { orderBy: { receivedAt: 'desc', number: 'desc' }, limit: 1 }) : []
      return welcome({ first, cohort: cohort.name, startsOn: cohort.startsOn, pattern: cohort.pattern, core: head?.number ?? null, lesson: lesson?.number ?? 1, url: `${app.config.publicUrl}/lessons${lesson ? `/${lesson.slug}` : ''}` })
    }
  }
}

/** What the safety form still needs of somebody whose signature does not stand. */
async function itemsLeft(em: EntityManager, of: Pick<LoadedReminderCase['of'], 'consent'>, person: string | null): Promise<string[]> {
  if (of.consent === 'asked again') return ['to be read and signed again, because a safety point of it changed']
  const note = person === null ? null : await em.findOne(SafetyNote, { person })
  return ['its ticks and your name under them', ...(note?.bootSize ? [] : ['your boot size'])]
}
