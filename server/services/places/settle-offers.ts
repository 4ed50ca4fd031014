import type { EntityManager } from '@mikro-orm/postgresql'
import { BenchPlace } from '#server/db/entities/BenchPlace'
import type { Cohort } from '#server/db/entities/Cohort'
import { firstName } from '#server/services/mail/first-name'
import { waitingListOffer } from '#server/services/mail/templates/waiting-list-offer'
import { writeMail } from '#server/services/mail/write-mail'
import { schoolDay } from '#shared/contract/school-day'
import type { App } from '#server/utils/app'
import { freeSlots } from './free-slots'
import { notePlace, type PlaceAction, type PlaceActor } from './note-place'
import { holdMs, offerPlace } from './offer-place'
import { placeLink } from './place-link'

/** How the list is asked: who had fewest offers first, then by the order of asking. The turn shown on the link is the place in this order. */
export const listOrder = { offersLetGo: 'asc', listNumber: 'asc', createdAt: 'asc', id: 'asc' } as const

/** Puts an offer that was not taken back on the list: its turn stays. The bench is free from here on. */
export function backToList(tx: EntityManager, place: BenchPlace, actor: PlaceActor, action: PlaceAction): void {
  notePlace(tx, place, actor, action, { slot: place.slot })
  Object.assign(place, { state: 'waiting-list', slot: null, offeredAt: null, heldUntil: null, offersLetGo: place.offersLetGo + 1 })
}

export interface Settling {
  /** A bench came free that had somebody on it: the whole list is asked, in order, once more. */
  freed?: boolean
  /** Who just let an offer go, and is not asked again for the same bench. */
  letGo?: BenchPlace[]
}

/**
 * Brings a cohort's offers up to now: those that ran out go back to the list, and benches that are free go to whoever waits.
 *
 * A bench goes down the list once: after an offer was let go it is offered to those who had fewer offers than that one, and when nobody
 * is left it is free for anybody. When a bench comes free by itself the list is asked from its top. The cohort is locked by the caller.
 *
 * @returns benches free afterwards, smallest first
 */
export async function settleOffers(tx: EntityManager, app: App, cohort: Cohort, { freed = false, letGo = [] }: Settling = {}): Promise<number[]> {
  const now = app.clock.schoolNow()
  const lapsed = await tx.find(BenchPlace, { cohort: cohort.id, state: 'offered', heldUntil: { $lte: now } })
  for (const place of lapsed) backToList(tx, place, 'job', 'place-offer-lapsed')
  const gone = [...letGo, ...lapsed]
  const slots = await freeSlots(tx, cohort)
  // Nobody is offered a place in a cohort that has begun.
  if (slots.length === 0 || schoolDay(now) >= cohort.startsOn) return slots

  const fewerThan = freed ? Infinity : Math.max(1, ...gone.map(place => place.offersLetGo))
  const waiting = await tx.find(BenchPlace, { cohort: cohort.id, state: 'waiting-list', id: { $nin: gone.map(place => place.id) } }, { orderBy: listOrder })
  for (const place of waiting.filter(one => one.offersLetGo < fewerThan)) {
    const slot = slots[0]
    if (slot === undefined) break
    if (await offerFromList(tx, app, place, cohort, slot, 'job')) slots.shift()
  }
  return slots
}

/** Offers a free bench to somebody on the list, for 48 hours, by e-mail. @returns false when another place is held for the address */
export async function offerFromList(tx: EntityManager, app: App, place: BenchPlace, cohort: Cohort, slot: number, actor: PlaceActor): Promise<boolean> {
  if (!await offerPlace(tx, app, place, cohort, slot, holdMs.offer, actor)) return false
  await writeMail(tx, app, {
    key: `waiting-list-offer:${place.id}:${place.offersLetGo}:${place.offeredAt?.getTime() ?? 0}`,
    template: 'waiting-list-offer',
    to: { id: place.person?.id ?? null, email: place.email },
    letter: waitingListOffer({ first: firstName(place.name), cohort: cohort.name, startsOn: cohort.startsOn, until: (place.heldUntil ?? app.clock.schoolNow()).toISOString(), url: placeLink(app, place) }),
  })
  return true
}
