import type { Loaded } from '@mikro-orm/postgresql'
import type { Reading } from '#server/db/entities/Reading'
import type { ReadingView } from '#shared/contract/views'
import { readingValue } from '#shared/domain/rubric/reading-value'

/** A reading as pages show it: the figures as typed, and what they come to with the doubt of gauge and repeats (k = 2). */
export function viewReading(reading: Loaded<Reading, 'instrument' | 'addedBy'>): ReadingView {
  const { id, quantity, values, baseUnit, expandedU, takenAt } = reading
  const spot = reading.at?.spot ?? null
  const at = { quantity, cylinder: reading.cylinder ?? null, side: reading.side ?? null, spot, when: reading.when ?? null }
  const { value, standardUncertainty } = readingValue({ ...at, id, op: 0, values, unit: baseUnit, instrument: reading.instrument.$.code, expandedU, takenAt: takenAt.getTime() }, baseUnit)
  return {
    ...at, id, at: reading.at === null || reading.at === undefined ? null : { ...reading.at }, values: reading.asTyped, unit: reading.unit, mean: value, baseUnit,
    expandedUncertainty: 2 * (standardUncertainty ?? 0), instrument: reading.instrument.$.name, takenAt: takenAt.toISOString(), voidedAt: reading.voidedAt?.toISOString() ?? null, addedBy: reading.addedBy.$.name,
  }
}
