import type { EntityManager } from '@mikro-orm/postgresql'
import { BenchPlace } from '#server/db/entities/BenchPlace'
import type { Actor } from '#server/utils/actor'
import type { App } from '#server/utils/app'
import { recordEvent } from '#server/utils/record-event'
import { Refusal } from '#server/utils/refusal'
import type { RosterPreview, RosterTakeInput } from '#shared/contract/places'
import { emptyPlace } from './empty-place'
import { freeSlots } from './free-slots'
import { lockCohort } from './lock-place'
import { makeAccount } from './make-account'
import { notePlace } from './note-place'
import { previewRoster } from './preview-roster'
import { settleOffers } from './settle-offers'

/**
 * Takes a list of people into a cohort, as it was previewed: each gets a confirmed place and an invitation. All rows or none.
 *
 * @throws {Refusal} cohort_not_found, roster_unreadable, roster_changed and roster_has_problems, both with the `preview` as it is now
 */
export async function takeRoster(em: EntityManager, app: App, actor: Actor, code: string, { csv, seen }: RosterTakeInput): Promise<RosterPreview> {
  return em.transactional(async (tx) => {
    const cohort = await lockCohort(tx, { code })
    await settleOffers(tx, app, cohort)
    await tx.flush()
    const preview = await previewRoster(tx, code, csv)
    if (preview.seen !== seen) throw new Refusal('roster_changed', undefined, { preview })
    if (preview.bad > 0) throw new Refusal('roster_has_problems', undefined, { preview })
    const slots = await freeSlots(tx, cohort)
    const now = app.clock.schoolNow()
    for (const { name, email, sponsor } of preview.rows) {
      const slot = slots.shift()
      if (slot === undefined) throw new Refusal('no_free_place')
      const place = tx.create(BenchPlace, { ...emptyPlace, cohort, name, email, note: sponsor === '' ? '' : `Sponsor as listed: ${sponsor}`, state: 'confirmed', slot, confirmedAt: now, createdAt: new Date() })
      tx.persist(place)
      notePlace(tx, place, actor, 'place-from-roster', { cohort: cohort.code, slot })
      await tx.flush()
      await makeAccount(tx, app, place, actor)
    }
    recordEvent(tx, { actor: actor.id, action: 'roster-taken', subject: `cohort:${cohort.id}`, detail: { people: preview.rows.length } })
    return preview
  })
}
