import { randomUUID } from 'node:crypto'
import type { EntityManager } from '@mikro-orm/postgresql'
import { BenchPlace } from '#server/db/entities/BenchPlace'
import type { Cohort } from '#server/db/entities/Cohort'
import { firstName } from '#server/services/mail/first-name'
import { placeAsked } from '#server/services/mail/templates/place-asked'
import { writeMail } from '#server/services/mail/write-mail'
import { schoolDay } from '#shared/contract/school-day'
import type { App } from '#server/utils/app'
import { Refusal } from '#server/utils/refusal'
import type { PlaceAskAnswer, PlaceAskInput } from '#shared/contract/places'
import { countAsk } from './ask-throttle'
import { countPlaces } from './count-places'
import { emptyPlace } from './empty-place'
import { lockCohort } from './lock-place'
import { notePlace } from './note-place'
import { placeLink } from './place-link'
import { liveStates } from './place-states'

/**
 * Keeps a visitor's ask and mails the link that holds the place once it is opened. Nothing is held yet: the address may be anybody's.
 *
 * Asks of a cohort are kept one after the other and numbered as they are, so the numbers are 1, 2, 3 with no gap and no tie, in the
 * order in which they were committed and stand in the audit record. Somebody who asked before gets the link of that ask again, and no
 * new number; the answer does not tell.
 *
 * @throws {Refusal} asks_too_many, cohort_not_found, cohort_not_open
 */
export async function askForPlace(em: EntityManager, app: App, code: string, input: PlaceAskInput, address: string): Promise<PlaceAskAnswer> {
  await countAsk(em.fork(), input.email, address, new Date())
  return em.transactional(async (tx) => {
    const cohort = await lockCohort(tx, { code })
    if (!cohort.open || schoolDay(app.clock.schoolNow()) >= cohort.startsOn) throw new Refusal('cohort_not_open')
    const place = await tx.findOne(BenchPlace, { cohort: cohort.id, email: input.email, state: { $in: [...liveStates] } }) ?? await keepAsk(tx, app, cohort, input)
    await writeMail(tx, app, {
      key: `place-asked:${place.id}:${randomUUID()}`,
      template: 'place-asked',
      to: { id: place.person?.id ?? null, email: input.email },
      letter: placeAsked({ first: firstName(place.name), cohort: cohort.name, startsOn: cohort.startsOn, url: placeLink(app, place) }),
    })
    const taken = (await countPlaces(tx, [cohort.id])).get(cohort.id)?.taken ?? 0
    return { sentTo: input.email, freeNow: taken < cohort.places }
  })
}

async function keepAsk(tx: EntityManager, app: App, cohort: Cohort, { name, email, note }: PlaceAskInput): Promise<BenchPlace> {
  const before = await tx.findOne(BenchPlace, { cohort: cohort.id, listNumber: cohort.lastListNumber })
  // Later than the ask before, also within one millisecond: the audit record is put in order by its times.
  const at = new Date(Math.max(Date.now(), before ? before.createdAt.getTime() + 1 : 0))
  cohort.lastListNumber += 1
  const place = tx.create(BenchPlace, { ...emptyPlace, cohort, name, email, note, state: 'asked', listNumber: cohort.lastListNumber, askedAt: app.clock.schoolNow(), createdAt: at })
  tx.persist(place)
  notePlace(tx, place, 'visitor', 'place-asked', { cohort: cohort.code, number: cohort.lastListNumber }, at)
  await tx.flush()
  return place
}
