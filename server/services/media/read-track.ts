import type { TrackInput, Cue } from '#shared/contract/media'
import * as webvtt from 'webvtt-parser'

export interface TrackIssue { path: string, message: string }

const mostCues = 5000
const longestCue = 500
const mostIssues = 50
/** The package's own list lacks the semicolons, which then stay in the words. */
const entities = { '&amp;': '&', '&lt;': '<', '&gt;': '>', '&lrm;': '\u200e', '&rlm;': '\u200f', '&nbsp;': '\u00a0' } as const
const milli = (seconds: number) => Math.round(seconds * 1000)

/**
 * Reads WebVTT into plain cues, and says by line what is wrong with it: what the format forbids, and what no reader could follow
 * (one caption over another, words after the film's end, a screen full of text).
 *
 * @param durationSeconds of the film; null when nobody knows it
 */
export function readTrack({ kind, vtt }: Pick<TrackInput, 'kind' | 'vtt'>, durationSeconds: number | null): { cues: Cue[], issues: TrackIssue[] } {
  // The package gives what it has to whoever asks for `exports`, which a bundler hands over as it is and Node as `default`.
  const { WebVTTParser } = 'default' in webvtt ? webvtt.default as typeof webvtt : webvtt
  const { cues, errors } = new WebVTTParser(entities).parse(vtt, kind)
  const named = errors.map(({ line, message }) => ({ line, message }))
  const lines = timingLines(vtt)
  const read = cues.map(({ startTime, endTime, tree }, index) => ({ fromMs: milli(startTime), toMs: milli(endTime), text: plain(tree.children), line: lines[index] ?? 1 }))
  const found = [...named]
  // The lines of cues are counted from the timings the parser took; with an error it may have skipped one.
  if (errors.length === 0) {
    if (read.length === 0) found.push({ line: 1, message: 'There is nothing to show in it.' })
    if (read.length > mostCues) found.push({ line: read[mostCues]?.line ?? 1, message: `A track has at most ${mostCues} entries.` })
    for (const [index, cue] of read.slice(0, mostCues).entries()) found.push(...wrongWith(cue, read[index - 1], durationSeconds))
  }
  return {
    cues: read.map(({ fromMs, toMs, text }) => ({ fromMs, toMs, text })),
    issues: found.slice(0, mostIssues).map(({ line, message }) => ({ path: `line ${line}`, message })),
  }
}

type Placed = Cue & { line: number }

function wrongWith(cue: Placed, before: Placed | undefined, durationSeconds: number | null): { line: number, message: string }[] {
  const wrong: string[] = []
  if (cue.text === '') wrong.push('Says nothing.')
  if (cue.text.length > longestCue) wrong.push(`Has ${cue.text.length} characters; nobody reads more than ${longestCue} at once.`)
  if (before && cue.fromMs < before.toMs) wrong.push('Begins before the one above it ends.')
  if (durationSeconds !== null && cue.fromMs >= milli(durationSeconds)) wrong.push(`Begins after the film ends (${durationSeconds.toFixed(1)} s).`)
  return wrong.map(message => ({ line: cue.line, message }))
}

/** Numbers, from 1, of the lines that say when a cue is shown; a note cannot hold such an arrow. */
function timingLines(vtt: string): number[] {
  return vtt.split(/\r\n|\r|\n/).flatMap((line, index) => line.includes('-->') ? [index + 1] : [])
}

type Node = webvtt.Tree['children'][number]

/** The words of a cue, on one line, without who says them or how they are set. */
function plain(nodes: readonly Node[]): string {
  return words(nodes).replace(/\s+/g, ' ').trim()
}

function words(nodes: readonly Node[]): string {
  return nodes.map(node => node.type === 'text' ? node.value : node.type === 'object' ? words(node.children as readonly Node[]) : '').join('')
}
