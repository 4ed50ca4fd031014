import { defineEntity, p, type InferEntity } from '@mikro-orm/core'
import { id, instant, real } from './column'

/** A gauge of the school with its honest doubt. */
export const Instrument = defineEntity({
  name: 'Instrument',
  properties: {
    id: id(),
    /** Stable code used in readings: `split-ball`, `caliper`, `wall-gauge`, ... */
    code: p.string().length(60).unique(),
    name: p.string().length(120),
    /** Quantities it may read. */
    quantities: p.array(),
    /** k = 2, in `unit`. */
    expandedU: real(),
    /** When the doubt depends on the value ("2 %"). */
    relative: p.boolean().default(false),
    unit: p.string().length(20),
    dueOn: p.date().nullable(),
    createdAt: instant().onCreate(() => new Date()),
  },
})
export type Instrument = InferEntity<typeof Instrument>
