import { defineEntity, p, type InferEntity } from '@mikro-orm/core'
import type { Cue } from '../../../shared/contract/media'
import { id, instant, jsonOnce } from './column'
import { MediaAsset } from './MediaAsset'
import { User } from './User'

/** Captions or chapters of a film, as WebVTT and as read from it. */
export const MediaTrack = defineEntity({
  name: 'MediaTrack',
  properties: {
    id: id(),
    asset: () => p.manyToOne(MediaAsset).ref(),
    kind: p.enum(['captions', 'chapters'] as const),
    language: p.string().length(12),
    vtt: p.text(),
    cues: jsonOnce<Cue[]>(),
    savedBy: () => p.manyToOne(User).ref().nullable(),
    savedAt: instant(),
  },
  uniques: [{ properties: ['asset', 'kind', 'language'] }],
})
export type MediaTrack = InferEntity<typeof MediaTrack>
