import { BenchPlace } from '#server/db/entities/BenchPlace'
import type { App } from '#server/utils/app'
import { forgetAsks } from './ask-throttle'
import { lockCohort } from './lock-place'
import { settleOffers } from './settle-offers'

/** Lets offers run out and pass on, in one cohort or in all where somebody holds an offer or waits. Each cohort is a transaction of its own. */
export async function passOffers(app: App, cohortId: string | null): Promise<void> {
  if (cohortId === null) await forgetAsks(app.orm.em.fork(), app.clock.now())
  const places = await app.orm.em.fork().find(BenchPlace, { state: { $in: ['offered', 'waiting-list'] }, ...(cohortId === null ? {} : { cohort: cohortId }) }, { fields: ['cohort'] })
  for (const id of new Set(places.map(place => place.cohort.id))) {
    await app.orm.em.fork().transactional(async (tx) => {
      await settleOffers(tx, app, await lockCohort(tx, { id }))
    })
  }
}
