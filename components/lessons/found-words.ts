import type { SearchHit } from '#shared/contract/lessons'

/** A snippet in pieces: what stands between ⟦ and ⟧ was found. A bracket without its other half is text. */
export function snippetPieces(snippet: string): { text: string, found: boolean }[] {
  return snippet.split(/(⟦[^⟦⟧]*⟧)/).filter(Boolean).map(piece => /^⟦[^⟦⟧]*⟧$/.test(piece) ? { text: piece.slice(1, -1), found: true } : { text: piece.replace(/[⟦⟧]/g, ''), found: false }).filter(piece => piece.text)
}

/** Where a hit opens: at its heading, or in the film at its second. */
export function hitPath(hit: Pick<SearchHit, 'lesson' | 'anchor' | 'clip' | 'seconds'>): string {
  const query = hit.clip ? `?clip=${encodeURIComponent(hit.clip)}&t=${Math.max(0, Math.floor(hit.seconds ?? 0))}` : ''
  return `/lessons/${hit.lesson.slug}${query}${!hit.clip && hit.anchor ? `#${hit.anchor}` : ''}`
}

/** A second of a film as people say it: 75 is "1:15". */
export function clockTime(seconds: number): string {
  const whole = Math.max(0, Math.floor(seconds))
  const [hours, minutes, rest] = [Math.floor(whole / 3600), Math.floor(whole / 60) % 60, String(whole % 60).padStart(2, '0')]
  return hours ? `${hours}:${String(minutes).padStart(2, '0')}:${rest}` : `${minutes}:${rest}`
}

/** Hits by lesson, the lesson with the best hit first, each lesson's hits as they came. */
export function byLesson(hits: readonly SearchHit[]): { lesson: SearchHit['lesson'], hits: SearchHit[] }[] {
  const groups = new Map<string, { lesson: SearchHit['lesson'], hits: SearchHit[] }>()
  for (const hit of hits) {
    const group = groups.get(hit.lesson.slug) ?? { lesson: hit.lesson, hits: [] }
    group.hits.push(hit)
    groups.set(hit.lesson.slug, group)
  }
  return [...groups.values()]
}

/** Seconds of "1:15", "0:04.5", "1:00:00" or "75"; undefined where it is no time. */
export function readClockTime(text: string): number | undefined {
  const parts = /^(?:(?:(\d{1,2}):)?([0-5]?\d):)?(\d{1,5}(?:[.,]\d{1,3})?)$/.exec(text.trim())
  if (!parts) return undefined
  const seconds = Number((parts[3] ?? '').replace(',', '.'))
  if (parts[2] !== undefined && seconds >= 60) return undefined
  return Number(parts[1] ?? 0) * 3600 + Number(parts[2] ?? 0) * 60 + seconds
}
