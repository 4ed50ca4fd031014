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

const size = z.number().int().min(1).max(20_000)

/** Length and size of a film are as the browser that sent it read them; a picture's are read here. */
export const mediaInput = z.object({ uploadId: z.string().uuid(), title: someText(160), durationSeconds: z.number().finite().min(0).max(86_400).optional(), width: size.optional(), height: size.optional() }).strict()
export type MediaInput = z.infer<typeof mediaInput>

export const mediaQuery = z.object({ q: cleanText(160).optional(), kind: z.enum(['image', 'video']).optional(), after: z.string().max(400).optional(), limit: z.coerce.number().int().min(1).max(100).default(24) })
export type MediaQuery = z.infer<typeof mediaQuery>

const language = z.string().regex(/^[a-z]{2,3}(-[A-Za-z0-9]{2,8})?$/, 'is not a language').default('en')

/** What a film's captions may weigh: an hour and a half of talk is about 100,000 characters. */
export const longestTrack = 500_000

export const trackInput = z.object({ kind: z.enum(['captions', 'chapters']), language, vtt: someText(longestTrack) }).strict()
export type TrackInput = z.infer<typeof trackInput>
export const trackFileParams = z.object({ id: z.string().uuid(), file: z.enum(['captions.vtt', 'chapters.vtt']) })
export const trackFileQuery = z.object({ language })

export const positionInput = z.object({ seconds: z.number().finite().min(0).max(86_400), finished: z.boolean().default(false) }).strict()
export type PositionInput = z.infer<typeof positionInput>

/**
 * A picture or film on its way to the school, as a screen draws it. `reading`: its SHA-256 is being made. `checking`: everything was
 * sent, and the school reads it once more from end to end.
 */
export interface MediaSending {
  phase: 'none' | 'reading' | 'sending' | 'paused' | 'finishing' | 'checking' | 'done' | 'refused'
  filename: string
  /** 0 to 1, of what `phase` does. */
  share: number
  /** Why it was refused, or why it waits. */
  sentence: string | null
  /** Files begun on this device and not yet whole: choose them again to go on. */
  unfinished: string[]
}
