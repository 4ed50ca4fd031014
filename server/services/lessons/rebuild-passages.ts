import type { EntityManager } from '@mikro-orm/postgresql'
import { LessonPassage } from '#server/db/entities/LessonPassage'
import { LessonVersion } from '#server/db/entities/LessonVersion'
import { LessonWord } from '#server/db/entities/LessonWord'
import { MediaTrack } from '#server/db/entities/MediaTrack'
import type { Cue } from '#shared/contract/media'
import { sectionsOf, type Section, type SectionClip } from '#shared/lesson/sections-of'
import { distinctWords } from './distinct-words'

/** A pause after which what is said next is another matter, milliseconds. */
const pauseMs = 3000

/**
 * Makes what search finds of a lesson's newest version anew: what stands under each heading, and what is said in each part of a film it
 * shows. Called in the transaction that publishes, and again when captions of a published film change. The lesson is locked meanwhile.
 */
export async function rebuildPassages(tx: EntityManager, lessonId: string): Promise<void> {
  await tx.getConnection().execute('select 1 from lesson where id = ? for update', [lessonId], 'all', tx.getTransactionContext())
  const [newest] = await tx.find(LessonVersion, { lesson: lessonId }, { orderBy: { version: 'desc' }, limit: 1 })
  await tx.nativeDelete(LessonPassage, { lesson: lessonId })
  if (!newest) return
  const sections = sectionsOf(newest.document)
  const assets = [...new Set(sections.flatMap(section => section.clips.map(clip => clip.asset)))]
  const tracks = assets.length === 0 ? [] : await tx.find(MediaTrack, { asset: { $in: assets }, kind: 'captions' }, { orderBy: { language: 'asc' } })
  const rows = sections.flatMap((section) => {
    const heading = section.heading || newest.title
    const text = { kind: 'text' as const, anchor: section.id, heading, body: section.body, clip: null, fromMs: null }
    return [text, ...section.clips.flatMap(clip => spoken(clip, tracks.find(track => track.asset.id === clip.asset)?.cues ?? [], heading))]
  })
  // The first passage carries the lesson's title, so that a lesson is found by its name.
  const titled = sections[0]?.id === '' ? rows : [{ kind: 'text' as const, anchor: '', heading: newest.title, body: '', clip: null, fromMs: null }, ...rows]
  // Partial: the database makes the column search reads.
  tx.persist(titled.map((row, ordinal) => tx.create(LessonPassage, { ...row, lesson: lessonId, ordinal }, { partial: true })))
  await tx.flush()
  await keepWords(tx, titled)
}

/**
 * The captions that begin within a part of a film. Each passage is one caption, then on a line of its own the caption after it, so that
 * a phrase is found across the two; search shows the second of the one it begins in.
 */
function spoken(clip: SectionClip, cues: readonly Cue[], heading: string) {
  const from = clip.start * 1000
  const until = clip.end === null ? Infinity : clip.end * 1000
  const heard = cues.filter(cue => cue.toMs > from && cue.fromMs < until)
  return heard.map((cue, index) => {
    const next = heard[index + 1]
    const line = (text: string) => text.replaceAll(/\s+/g, ' ').trim()
    const follows = next && next.fromMs - cue.toMs < pauseMs ? `\n${line(next.text)}` : ''
    return { kind: 'caption' as const, anchor: clip.anchor, heading, body: line(cue.text) + follows, clip: clip.asset, fromMs: Math.max(cue.fromMs, Math.round(from)) }
  })
}

/** What a search may have meant by a misspelt word. In order, so that two lessons published at once do not wait for each other. */
async function keepWords(tx: EntityManager, rows: readonly Pick<Section, 'heading' | 'body'>[]): Promise<void> {
  const words = distinctWords(rows.map(row => `${row.heading} ${row.body}`).join(' '))
  if (words.length === 0) return
  await tx.createQueryBuilder(LessonWord).insert(words.map(word => ({ word }))).onConflict('word').ignore().execute('run')
}
