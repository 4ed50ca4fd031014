import type { EntityManager } from '@mikro-orm/postgresql'
import type { ReadingAt } from '#server/db/entities/Reading'
import type { Actor } from '#server/utils/actor'
import type { App } from '#server/utils/app'
import type { SpotView } from '#shared/contract/views'
import { spotOf } from '#shared/domain/rubric/spot-of'
import { readingValue } from '#shared/domain/rubric/reading-value'
import { quantityInWords } from '#shared/domain/rubric/words'
import type { Side } from '#shared/domain/units/port'
import { findHead } from './find-head'

/**
 * Everything read at every spot of a head: the newest reading of each quantity at each spot, the older ones behind it. Voided
 * readings are left out.
 *
 * @throws {Refusal} head_not_found
 */
export async function listSpots(em: EntityManager, app: App, actor: Actor, headId: string): Promise<SpotView[]> {
  const head = await findHead(em, app, actor, headId)
  const readings = await readingsOf(em, head.id)
  const spots = new Map<string, SpotView>()
  for (const one of readings) {
    const { quantity, cylinder, side, op } = one
    const at = { quantity, cylinder, side, spot: spotOf(one.at ?? {}) }
    const takenAt = new Date(one.takenAt).toISOString()
    const { value, standardUncertainty } = readingValue({ ...at, id: one.id, op, when: one.when, values: one.values, unit: one.baseUnit, instrument: one.code, expandedU: one.expandedU, takenAt: one.takenAt }, one.baseUnit)
    const key = JSON.stringify(at)
    const newer = spots.get(key)
    if (newer) newer.older.push({ value, op, takenAt })
    else {
      spots.set(key, {
        ...at, title: quantityInWords(quantity), op, value, unit: one.baseUnit, expandedUncertainty: 2 * (standardUncertainty ?? 0),
        asTyped: one.asTyped, typedUnit: one.unit, instrument: one.instrument, takenAt, older: [],
      })
    }
  }
  // One collator: made anew for each of ten thousand comparisons it takes longer than the query.
  const byNumber = new Intl.Collator('en', { numeric: true })
  return [...spots.values()].sort((a, b) => byNumber.compare(a.quantity, b.quantity) || (a.cylinder ?? 0) - (b.cylinder ?? 0) || byNumber.compare(a.side ?? '', b.side ?? '') || byNumber.compare(a.spot ?? '', b.spot ?? ''))
}

interface Row { id: string, quantity: string, op: number, cylinder: number | null, side: Side | null, at: ReadingAt | null, when: 'before' | 'after' | null, asTyped: string[], unit: string, values: number[], baseUnit: string, code: string, instrument: string, expandedU: number, takenAt: number }

/** Readings that stand, newest first. Plain rows: a head has a thousand of them before long, and making each an entity takes longest of all. */
function readingsOf(em: EntityManager, headId: string): Promise<Row[]> {
  return em.getConnection().execute<Row[]>(`
    select r.id, r.quantity, s.op, r.cylinder, r.side, r.at, r."when", r.as_typed as "asTyped", r.unit, r."values", r.base_unit as "baseUnit", i.code, i.name as instrument, r.expanded_u as "expandedU",
      (extract(epoch from r.taken_at) * 1000)::double precision as "takenAt"
    from reading r join submission s on s.id = r.submission_id join instrument i on i.id = r.instrument_id
    where s.head_id = ? and r.voided_at is null
    order by r.taken_at desc, r.recorded_at desc, r.id`, [headId], 'all', em.getTransactionContext())
}
