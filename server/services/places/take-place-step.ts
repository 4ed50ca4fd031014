import type { EntityManager } from '@mikro-orm/postgresql'
import type { BenchPlace } from '#server/db/entities/BenchPlace'
import { writeResults } from '#server/services/reminders/write-results'
import type { Actor } from '#server/utils/actor'
import type { App } from '#server/utils/app'
import { Refusal } from '#server/utils/refusal'
import type { PlaceStepInput } from '#shared/contract/places'
import { withNote } from './cancel-place'
import { lockPlace } from './lock-place'
import { notePlace } from './note-place'
import { backToList, offerFromList, settleOffers } from './settle-offers'
import { stepsOf } from './view-place'

/** Years a finished student may read the lessons (handbook 5.4). */
const accessYears = 2

/**
 * One step of a place by the office. Stopping is no step: it is cancelling for unsafe work, with its rule and sum (`cancelPlace`).
 *
 * @throws {Refusal} place_not_found, place_state, no_free_place, offer_open
 */
export async function takePlaceStep(em: EntityManager, app: App, actor: Actor, id: string, { step, note }: PlaceStepInput): Promise<void> {
  await em.transactional(async (tx) => {
    const { place, cohort } = await lockPlace(tx, id)
    if (!stepsOf(place).includes(step)) throw new Refusal('place_state')
    place.note = withNote(place.note, note)
    if (step === 'offer') {
      const [slot] = await settleOffers(tx, app, cohort)
      // It may have had its turn just now.
      if ((place as BenchPlace).state === 'offered') return
      if (slot === undefined) throw new Refusal('no_free_place')
      if (!await offerFromList(tx, app, place, cohort, slot, actor)) throw new Refusal('offer_open')
    }
    if (step === 'withdraw-offer') {
      backToList(tx, place, actor, 'place-offer-withdrawn')
      await settleOffers(tx, app, cohort, { letGo: [place] })
    }
    if (step === 'here') {
      place.state = 'here'
      notePlace(tx, place, actor, 'place-here')
    }
    if (step === 'finish') await finish(tx, app, actor, place)
  })
}

async function finish(tx: EntityManager, app: App, actor: Actor, place: BenchPlace): Promise<void> {
  const now = app.clock.schoolNow()
  const until = new Date(now)
  until.setUTCFullYear(until.getUTCFullYear() + accessYears)
  Object.assign(place, { state: 'finished', slot: null, finishedAt: now, accessUntil: until })
  notePlace(tx, place, actor, 'place-finished', { accessUntil: until.toISOString() })
  await tx.flush()
  await writeResults(tx, app, place)
}
