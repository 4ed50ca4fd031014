import type { EntityManager } from '@mikro-orm/postgresql'
import { Cohort } from '#server/db/entities/Cohort'
import type { App } from '#server/utils/app'
import { Refusal } from '#server/utils/refusal'
import type { CohortOffer } from '#shared/contract/places'
import { schoolDay } from '#shared/contract/school-day'
import { balanceDueOn } from '#shared/domain/money/balance-due-on'
import { courseWeeks } from '#shared/domain/money/course-weeks'
import { refundTable } from '#shared/domain/money/refund-table'
import { countPlaces, type PlaceCount } from './count-places'

/** A cohort as a stranger sees it. The course is loaded. */
export function toOffer(app: Pick<App, 'clock'>, cohort: Cohort, { taken, waiting }: PlaceCount = { taken: 0, waiting: 0 }): CohortOffer {
  const course = cohort.course?.isInitialized() ? cohort.course.unwrap() : null
  const amount = (minor: number) => ({ minor, currency: cohort.currency })
  return {
    code: cohort.code, name: cohort.name, course: { code: course?.code ?? '', title: course?.title ?? '', summary: course?.summary ?? '' },
    startsOn: cohort.startsOn, endsOn: cohort.endsOn, weeks: courseWeeks(cohort.startsOn, cohort.endsOn), pattern: cohort.pattern,
    places: cohort.places, placesLeft: Math.max(0, cohort.places - taken), waiting,
    open: cohort.open && schoolDay(app.clock.schoolNow()) < cohort.startsOn,
    price: amount(cohort.priceMinor), deposit: amount(cohort.depositMinor), balanceDueOn: balanceDueOn(cohort.startsOn),
    refundRules: refundTable(cohort),
  }
}

/** One cohort as a stranger sees it. @throws {Refusal} cohort_not_found */
export async function viewOffer(em: EntityManager, app: Pick<App, 'clock'>, code: string): Promise<CohortOffer> {
  const cohort = await em.findOne(Cohort, { code }, { populate: ['course'] })
  if (!cohort) throw new Refusal('cohort_not_found')
  return toOffer(app, cohort, (await countPlaces(em, [cohort.id])).get(cohort.id))
}
