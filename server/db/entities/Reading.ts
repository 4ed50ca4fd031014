import { defineEntity, p, type InferEntity } from '@mikro-orm/core'
import { id, instant, jsonOnce, real } from './column'
import { Instrument } from './Instrument'
import { Submission } from './Submission'
import { User } from './User'

/** Where on the iron: the spot in the words of the want, and its parts when given apart. */
export interface ReadingAt { spot?: string, clock?: string, station?: number, height?: number, direction?: string }

/** Repeats of one quantity at one spot. `asTyped` is the evidence and never changes; a correction is a new row that voids the old. */
export const Reading = defineEntity({
  name: 'Reading',
  properties: {
    id: id(),
    submission: () => p.manyToOne(Submission).ref(),
    quantity: p.string().length(60),
    cylinder: p.integer().nullable(),
    side: p.enum(['intake', 'exhaust'] as const).nullable(),
    at: jsonOnce<ReadingAt>().nullable(),
    when: p.enum(['before', 'after'] as const).nullable(),
    /** The figures as they were typed, and their unit. */
    asTyped: p.array(),
    unit: p.string().length(20),
    /** The same in the quantity's base unit (mm for lengths). */
    values: p.array(Number).columnType('double precision[]'),
    baseUnit: p.string().length(20),
    instrument: () => p.manyToOne(Instrument).ref(),
    /** The instrument's doubt when it was read, k = 2, in the base unit. */
    expandedU: real(),
    addedBy: () => p.manyToOne(User).ref(),
    takenAt: instant(),
    recordedAt: instant(),
    /** Reading this one takes the place of. */
    voids: p.uuid().nullable(),
    voidedAt: instant().nullable(),
  },
  indexes: [{ properties: ['submission'] }],
})
export type Reading = InferEntity<typeof Reading>
