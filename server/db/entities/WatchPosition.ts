import { defineEntity, p, type InferEntity } from '@mikro-orm/core'
import { id, instant, real } from './column'
import { MediaAsset } from './MediaAsset'
import { User } from './User'

/** Where a person stopped in a film, on whichever device. */
export const WatchPosition = defineEntity({
  name: 'WatchPosition',
  properties: {
    id: id(),
    person: () => p.manyToOne(User).ref(),
    asset: () => p.manyToOne(MediaAsset).ref(),
    seconds: real(),
    finishedAt: instant().nullable(),
    updatedAt: instant(),
  },
  uniques: [{ properties: ['person', 'asset'] }],
})
export type WatchPosition = InferEntity<typeof WatchPosition>
