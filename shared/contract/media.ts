import { z } from 'zod'
import { cleanText, someText } from './text'

/** One caption or chapter, as read from WebVTT. */
export interface Cue { fromMs: number, toMs: number, text: string }

export interface MediaTrackView { kind: 'captions' | 'chapters', language: string, url: string, cues: Cue[] }
/** A picture or film for lessons. `fileUrl` is ours and sends on to a signed address; it may be asked again at any time. */
export interface MediaView {
  id: string, kind: 'image' | 'video', title: string, state: 'being checked' | 'ready' | 'refused', problem: string | null
  fileUrl: string, contentType: string, bytes: number, width: number | null, height: number | null, durationSeconds: number | null
  tracks: MediaTrackView[], addedBy: string | null, addedAt: string
  /** Where the reader stopped, seconds; null when never begun. */
  position: { seconds: number, finished: boolean } | null
}

export const mediaInput = z.object({ uploadId: z.string().uuid(), title: someText(160), durationSeconds: z.number().finite().min(0).max(86_400).optional(), width: z.number().int().min(1).max(20_000).optional(), height: z.number().int().min(1).max(20_000).optional() }).strict()
export type MediaInput = z.infer<typeof mediaInput>
export const trackInput = z.object({ kind: z.enum(['captions', 'chapters']), language: z.string().regex(/^[a-z]{2,3}(-[A-Za-z0-9]{2,8})?$/, 'is not a language').default('en'), vtt: cleanText(500_000) }).strict()
export type TrackInput = z.infer<typeof trackInput>
export const positionInput = z.object({ seconds: z.number().finite().min(0).max(86_400), finished: z.boolean().default(false) }).strict()
export type PositionInput = z.infer<typeof positionInput>
