import { defineEntity, p, type InferEntity } from '@mikro-orm/core'
import { id, instant, real } from './column'

/** A printed scale card: its two 100 mm bars as measured by caliper, and the thickness of its plate, mm. */
export const ScaleCard = defineEntity({
  name: 'ScaleCard',
  properties: {
    id: id(),
    number: p.string().length(20).unique(),
    barXMm: real(),
    barYMm: real(),
    thicknessMm: real(),
    createdAt: instant().onCreate(() => new Date()),
  },
})
export type ScaleCard = InferEntity<typeof ScaleCard>
