import { Cohort } from '../../server/db/entities/Cohort'
import { User } from '../../server/db/entities/User'
import type { App } from '../../server/utils/app'
import { schoolDay } from '../../shared/contract/school-day'
import { dayAfter } from '../../shared/domain/money/calendar-days'

export const cohortCode = 'DEP-26'

/** A cohort with a bench for everybody, at the handbook's prices, and the admin who gives places up for people. */
export async function makeSchool(app: App, places: number): Promise<Pick<User, 'id'>> {
  return app.orm.em.fork().transactional(async (tx) => {
    const startsOn = dayAfter(schoolDay(app.clock.schoolNow()), 100)
    tx.persist(tx.create(Cohort, { code: cohortCode, name: 'Deposits', course: null, startsOn, endsOn: dayAfter(startsOn, 88), pattern: 'weeks', places, open: true, priceMinor: 245_000, depositMinor: 35_000, currency: 'GBP', createdAt: new Date() }))
    const corin = tx.create(User, { email: 'corin@sallowbeck.example', name: 'Corin Ashdown', roles: ['admin'], passwordHash: null, handAllowanceMm: null, createdAt: new Date() })
    tx.persist(corin)
    await tx.flush()
    return { id: corin.id }
  })
}
