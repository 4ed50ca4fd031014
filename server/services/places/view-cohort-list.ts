import type { EntityManager } from '@mikro-orm/postgresql'
import { BenchPlace } from '#server/db/entities/BenchPlace'
import { Clearance } from '#server/db/entities/Clearance'
import { PracticeHead } from '#server/db/entities/PracticeHead'
import { consentStates } from '#server/services/safety/consent-states'
import type { Actor } from '#server/utils/actor'
import type { App } from '#server/utils/app'
import type { CohortListView } from '#shared/contract/places'
import { findVisibleCohort } from './cohort-rights'
import { countPlaces } from './count-places'
import { toCohortRow } from './list-cohorts'
import { listOrder } from './settle-offers'

/** A cohort's people for the wall of the shop: bench, head, safety form and clearances as they stand now, and who waits. @throws {Refusal} cohort_not_found */
export async function viewCohortList(em: EntityManager, app: App, actor: Actor, code: string): Promise<CohortListView> {
  const now = app.clock.schoolNow()
  const cohort = await findVisibleCohort(em, app, actor, code)
  const places = await em.find(BenchPlace, { cohort: cohort.id, state: { $in: ['offered', 'deposit-paid', 'confirmed', 'here', 'finished'] } }, { orderBy: { slot: 'asc', name: 'asc' } })
  const people = places.flatMap(place => place.person?.id ?? [])
  const heads = await em.find(PracticeHead, { cohort: cohort.id, student: { $in: people } }, { orderBy: { receivedAt: 'desc' } })
  const clearances = await em.find(Clearance, { person: { $in: people }, withdrawnAt: null, from: { $lte: now }, until: { $gt: now } }, { orderBy: { tool: 'asc' } })
  const signed = await consentStates(em, people)
  const waiting = await em.find(BenchPlace, { cohort: cohort.id, state: 'waiting-list' }, { orderBy: listOrder })
  return {
    cohort: toCohortRow(cohort, (await countPlaces(em, [cohort.id])).get(cohort.id)),
    people: places.map(({ slot, name, email, state, person }) => ({
      slot: slot ?? null, name, email, state,
      head: heads.find(head => head.student.id === person?.id)?.number ?? null,
      consent: person !== null && person !== undefined && signed.get(person.id) === 'signed',
      clearances: [...new Set(clearances.filter(one => one.person.id === person?.id).map(one => one.tool))],
    })),
    waiting: waiting.map(({ name, askedAt }, index) => ({ turn: index + 1, name, askedAt: askedAt?.toISOString() ?? null })),
  }
}
