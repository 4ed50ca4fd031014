import { defineEntity, p, type InferEntity } from '@mikro-orm/core'
import { id, instant, real } from './column'
import { Upload } from './Upload'
import { User } from './User'

/** A picture or film lessons may show. */
export const MediaAsset = defineEntity({
  name: 'MediaAsset',
  properties: {
    id: id(),
    kind: p.enum(['image', 'video'] as const),
    title: p.string().length(160),
    /** A short name the starter curriculum calls it by; null for what people upload. */
    name: p.string().length(80).unique().nullable(),
    /** Null for the starter curriculum's own. */
    upload: () => p.manyToOne(Upload).ref().nullable(),
    /** What is played or shown: of an image the copy we made, of a film the file as it came. */
    key: p.string().length(200),
    contentType: p.string().length(120),
    bytes: p.bigint('number'),
    width: p.integer().nullable(),
    height: p.integer().nullable(),
    durationSeconds: real().nullable(),
    /** A film sent in parts is shown once a job has read it whole and found it as announced. */
    state: p.enum(['being checked', 'ready', 'refused'] as const),
    problem: p.text().nullable(),
    addedBy: () => p.manyToOne(User).ref().nullable(),
    addedAt: instant(),
  },
  indexes: [{ properties: ['addedAt'] }],
})
export type MediaAsset = InferEntity<typeof MediaAsset>
