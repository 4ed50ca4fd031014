import type { Cue, MediaView } from '#shared/contract/media'

/** A film, or a piece of one: seconds. `end` is null while nobody knows how long the film is. */
export interface FilmRange { start: number, end: number | null }

/** The piece to be played; an end past the film's own, or before its start, is the film's own. */
export function filmRange({ start, end, durationSeconds }: { start?: number, end?: number, durationSeconds: number | null }): FilmRange {
  const from = Math.max(0, start ?? 0)
  const to = end !== undefined && end > from ? end : durationSeconds
  return { start: from, end: to !== null && durationSeconds !== null ? Math.min(to, durationSeconds) : to }
}

/** Near enough to the end to have seen it. */
const nearlyOver = 0.5

export const isOver = (seconds: number, { end }: FilmRange): boolean => end !== null && seconds >= end - nearlyOver

/** Where it opens: at the second asked for, else where this person stopped within the piece, else at its beginning. */
export function openingSecond(range: FilmRange, at: number | undefined, position: MediaView['position']): number {
  const within = (seconds: number) => seconds >= range.start && (range.end === null || seconds < range.end)
  if (at !== undefined && within(at)) return at
  if (position && within(position.seconds) && !isOver(position.seconds, range)) return position.seconds
  return range.start
}

/** The entries of a track that are heard or seen within the piece. */
export function cuesWithin(cues: readonly Cue[], { start, end }: FilmRange): Cue[] {
  return cues.filter(cue => cue.toMs > start * 1000 && (end === null || cue.fromMs < end * 1000))
}

/** Which entry stands at a moment: the last begun, also in the pause after it; -1 before the first. */
export function cueAt(cues: readonly Cue[], seconds: number): number {
  // A player told to go to 17.1 s may say 17.099999.
  return cues.findLastIndex(cue => cue.fromMs <= seconds * 1000 + 1)
}
