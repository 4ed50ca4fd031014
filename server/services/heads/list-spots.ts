import type { EntityManager } from '@mikro-orm/postgresql'
import { Reading } from '#server/db/entities/Reading'
import type { Actor } from '#server/utils/actor'
import type { App } from '#server/utils/app'
import type { SpotView } from '#shared/contract/views'
import { spotOf } from '#shared/domain/rubric/spot-of'
import { readingValue } from '#shared/domain/rubric/reading-value'
import { quantityInWords } from '#shared/domain/rubric/words'
import { findHead } from './find-head'

/**
 * Everything read at every spot of a head: the newest reading of each quantity at each spot, the older ones behind it. Voided
 * readings are left out.
 *
 * @throws {Refusal} head_not_found
 */
export async function listSpots(em: EntityManager, app: App, actor: Actor, headId: string): Promise<SpotView[]> {
  const head = await findHead(em, app, actor, headId)
  const readings = await em.find(Reading, { submission: { head: head.id }, voidedAt: null }, { populate: ['submission', 'instrument'], orderBy: { takenAt: 'desc', recordedAt: 'desc', id: 'asc' } })
  const spots = new Map<string, SpotView>()
  for (const one of readings) {
    const spot = spotOf(one.at ?? {})
    const { op } = one.submission.$
    const place = { quantity: one.quantity, cylinder: one.cylinder ?? null, side: one.side ?? null, spot }
    const { value, standardUncertainty } = readingValue({ ...place, id: one.id, op, when: one.when ?? null, values: one.values, unit: one.baseUnit, instrument: one.instrument.$.code, expandedU: one.expandedU, takenAt: one.takenAt.getTime() }, one.baseUnit)
    const key = JSON.stringify(place)
    const newer = spots.get(key)
    if (newer) newer.older.push({ value, op, takenAt: one.takenAt.toISOString() })
    else {
      spots.set(key, {
        ...place, title: quantityInWords(one.quantity), op, value, unit: one.baseUnit, expandedUncertainty: 2 * (standardUncertainty ?? 0),
        asTyped: one.asTyped, typedUnit: one.unit, instrument: one.instrument.$.name, takenAt: one.takenAt.toISOString(), older: [],
      })
    }
  }
  return [...spots.values()].sort((a, b) => a.quantity.localeCompare(b.quantity) || (a.cylinder ?? 0) - (b.cylinder ?? 0) || (a.side ?? '').localeCompare(b.side ?? '') || (a.spot ?? '').localeCompare(b.spot ?? '', 'en', { numeric: true }))
}
