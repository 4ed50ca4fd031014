import type { EntityManager } from '@mikro-orm/postgresql'
import { Lesson } from '#server/db/entities/Lesson'
import type { Actor } from '#server/utils/actor'
import type { App } from '#server/utils/app'
import { Refusal } from '#server/utils/refusal'
import type { SearchAnswer, SearchHit, SearchQuery } from '#shared/contract/lessons'
import { lessonAccess } from './lesson-access'
import { oneSlipAway } from './one-slip-away'
import { asWrittenSql, nearestWordsSql, nearWordsSql, snippetsSql } from './search-sql'

interface Candidate { id: string, lesson_id: string, ordinal: number, kind: 'text' | 'caption', anchor: string, heading: string, clip_id: string | null, from_ms: number | null, rank: number, said: boolean, own: boolean }

/**
 * Searches what the lessons say and what is said in their films, best first. Words as written (phrases in quotes, -exclusions); where
 * nothing has them, half-typed and misspelt words are taken for the nearest of the lessons' own, first all of them, then any.
 *
 * @throws {Refusal} as readableLessons
 */
export async function searchLessons(em: EntityManager, app: App, actor: Actor, { q, limit }: SearchQuery): Promise<SearchAnswer> {
  const { everything, courses, until } = await lessonAccess(em, app, actor)
  if (!everything && courses.length === 0) throw new Refusal(until ? 'access_ended' : 'lessons_not_open')
  const run = <Row extends object>(sql: string, params: unknown[]) => em.getConnection().execute<Row[]>(sql, params, 'all', em.getTransactionContext())
  const within = [everything, JSON.stringify(courses)]

  let found = heard(await run<Candidate>(asWrittenSql, [q, ...within]))
  let near: string | null = null
  if (found.length === 0) {
    const words = wordsOf(q)
    const nearest = words.length === 0 ? [] : await run<{ asked: string, near: string }>(nearestWordsSql, [JSON.stringify(words.map(word => ({ word, slips: oneSlipAway(word) })))])
    for (const join of words.length > 1 ? [' & ', ' | '] : [' & ']) {
      near = words.map(word => nearQuery(word, nearest.filter(one => one.asked === word).map(one => one.near))).join(join)
      if (near === '') break
      found = heard(await run<Candidate>(nearWordsSql, [near, ...within]))
      if (found.length > 0) break
    }
  }
  const hits = found.slice(0, limit)
  if (hits.length === 0) return { items: [], spelling: false }
  const written = near === null ? q : null
  const snippets = await run<{ id: string, snippet: string }>(snippetsSql, [written, near ?? '', written ?? '', JSON.stringify(hits.map(hit => hit.id))])
  const lessons = await em.find(Lesson, { id: { $in: hits.map(hit => hit.lesson_id) } })
  return {
    spelling: near !== null,
    items: hits.flatMap((hit): SearchHit[] => {
      const lesson = lessons.find(one => one.id === hit.lesson_id)
      if (!lesson) return []
      return [{
        lesson: { slug: lesson.slug, number: lesson.number, title: lesson.title },
        kind: hit.kind,
        heading: hit.heading,
        anchor: hit.anchor,
        clip: hit.clip_id,
        seconds: hit.from_ms === null ? null : hit.from_ms / 1000,
        snippet: snippets.find(one => one.id === hit.id)?.snippet ?? '',
      }]
    }),
  }
}

/**
 * Each thing said once: a caption passage carries the caption after it too, so what is said in one is found in the one before as well,
 * and goes there only where the words begin in it.
 */
function heard(candidates: readonly Candidate[]): Candidate[] {
  const said = candidates.filter(one => one.said)
  const next = new Set(said.filter(one => one.own).map(one => `${one.lesson_id} ${one.clip_id} ${one.ordinal}`))
  return said.filter(one => one.kind === 'text' || one.own || !next.has(`${one.lesson_id} ${one.clip_id} ${one.ordinal + 1}`))
}

/** Words of at least two letters, as they stand in the lessons' own list; a search of more than eight is a sentence. */
function wordsOf(q: string): string[] {
  return [...new Set(q.toLowerCase().match(/(?<![\p{L}-]|\s-)\p{L}{2,40}/gu) ?? [])].slice(0, 8)
}

/** One word of a query: itself, what it begins, or a word near it. All of them are letters only, so nothing in them is an operator. */
function nearQuery(word: string, near: readonly string[]): string {
  return `(${[`'${word}':*`, ...near.filter(one => one !== word).map(one => `'${one}'`)].join(' | ')})`
}
