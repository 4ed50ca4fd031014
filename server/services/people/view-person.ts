import type { EntityManager } from '@mikro-orm/postgresql'
import { BenchPlace } from '#server/db/entities/BenchPlace'
import { CohortStaff } from '#server/db/entities/CohortStaff'
import { Session } from '#server/db/entities/Session'
import type { App } from '#server/utils/app'
import type { PersonDetail } from '#shared/contract/office'
import { findPerson } from './find-person'

/** One account: roles, places, cohorts taught now, and how many sign-ins work. @throws {Refusal} person_not_found */
export async function viewPerson(em: EntityManager, app: App, id: string): Promise<PersonDetail> {
  const person = await findPerson(em, id)
  const now = app.clock.schoolNow()
  const places = await em.find(BenchPlace, { person: id }, { populate: ['cohort'], orderBy: { cohort: { startsOn: 'desc' } } })
  const teaches = await em.find(CohortStaff, { person: id, from: { $lte: now }, $or: [{ until: null }, { until: { $gt: now } }] }, { populate: ['cohort'], orderBy: { cohort: { startsOn: 'desc' } } })
  return {
    id,
    name: person.name,
    email: person.email,
    roles: person.roles,
    invited: person.passwordHash === null,
    signedIn: await em.count(Session, { user: id, endedAt: null, expiresAt: { $gt: new Date() } }),
    places: places.map(place => ({ id: place.id, cohort: place.cohort.$.name, state: place.state })),
    teaches: teaches.map(link => ({ cohort: link.cohort.$.name, points: link.points })),
  }
}
