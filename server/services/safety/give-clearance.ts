import type { EntityManager } from '@mikro-orm/postgresql'
import { Clearance } from '#server/db/entities/Clearance'
import { User } from '#server/db/entities/User'
import { findPerson } from '#server/services/people/find-person'
import type { Actor } from '#server/utils/actor'
import type { App } from '#server/utils/app'
import { recordEvent } from '#server/utils/record-event'
import { Refusal } from '#server/utils/refusal'
import { staffTools, type ClearanceInput, type ClearanceOne } from '#shared/contract/safety'
import { schoolDay, startOfDay } from '#shared/contract/school-day'
import { dayAfter, isDay } from '#shared/domain/money/calendar-days'
import { viewClearance } from './clearance-views'

/** A clearance runs no longer than this without being given again: common practice, no source. */
const longestDays = 3 * 366

/**
 * Clears a person for a tool from now to the end of a day. One that still ran for the same tool is withdrawn by it, so that the newest
 * word counts, also when it is the shorter.
 *
 * @throws {Refusal} person_not_found, tool_for_staff or clearance_in_past
 */
export async function giveClearance(em: EntityManager, app: App, actor: Actor, { person: id, tool, until }: ClearanceInput): Promise<ClearanceOne> {
  return em.transactional(async (tx) => {
    const person = await findPerson(tx, id)
    if (staffTools.includes(tool) && !person.roles.some(role => role === 'instructor' || role === 'safety')) throw new Refusal('tool_for_staff')
    const now = app.clock.schoolNow()
    const today = schoolDay(now)
    if (!isDay(until) || until < today || until > dayAfter(today, longestDays)) throw new Refusal('clearance_in_past', undefined, { issues: [{ path: 'until', message: `a day from ${today} to ${dayAfter(today, longestDays)}` }] })
    // Two officers clearing one person at once: the second sees the first one's row, and withdraws it.
    await tx.getConnection().execute('select pg_advisory_xact_lock(hashtextextended(?, 0))', [`clearance:${id}:${tool}`], 'run', tx.getTransactionContext())
    const standing = await tx.find(Clearance, { person: id, tool, withdrawnAt: null, until: { $gt: now } })
    for (const one of standing) one.withdrawnAt = now
    const officer = await tx.findOneOrFail(User, actor.id)
    const clearance = tx.create(Clearance, { person, tool, from: now, until: startOfDay(dayAfter(until, 1)), givenBy: officer, withdrawnAt: null })
    tx.persist(clearance)
    recordEvent(tx, { actor: actor.id, action: 'clearance-given', subject: `clearance:${clearance.id}`, detail: { person: id, tool, until, insteadOf: standing.map(one => one.id) } })
    await tx.flush()
    return viewClearance(await tx.populate(clearance, ['givenBy']), now)
  })
}
