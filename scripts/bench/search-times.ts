import type { EntityManager } from '@mikro-orm/postgresql'
import { searchLessons } from '../../server/services/lessons/search-lessons'
import type { Actor } from '../../server/utils/actor'
import type { App } from '../../server/utils/app'
import { median } from '../../shared/domain/uncertainty/median'

export interface SearchTime { q: string, ms: number, hits: number, spelling: boolean }

/** Searches of every kind: a phrase of a film, rare words, words that stand nearly everywhere, half a word, misspelt ones, nothing. */
export const searches = ['lip at twelve o\'clock', '"spring and keeper"', 'dummy valve margin', 'the seat', 'valve', 'number', 'read the wall map before the cut', 'shor tur', 'dumy valvs', 'lihgt sprnig', 'guage pressur plat', 'basildenpel', 'xylophone', 'valve -seat'] as const

/**
 * How long the database takes over each search, milliseconds: planning and execution of every statement the service sends, as EXPLAIN
 * ANALYZE says them; the middle of several rounds.
 */
export async function searchTimes(em: EntityManager, app: App, actor: Actor, rounds = 5): Promise<SearchTime[]> {
  const times: SearchTime[] = []
  for (const q of searches) {
    const taken: number[] = []
    let answer = { items: [] as unknown[], spelling: false }
    for (let round = 0; round < rounds; round += 1) {
      const { watched, spent } = watch(em.fork())
      answer = await searchLessons(watched, app, actor, { q, limit: 20 })
      taken.push(spent())
    }
    times.push({ q, ms: median(taken), hits: answer.items.length, spelling: answer.spelling })
  }
  return times
}

/** An entity manager that has every statement explained before it is run. */
function watch(em: EntityManager): { watched: EntityManager, spent: () => number } {
  let sum = 0
  const connection = em.getConnection()
  const execute = async (sql: string, params: unknown[] = [], ...rest: unknown[]) => {
    const [row] = await connection.execute<{ 'QUERY PLAN': { 'Planning Time': number, 'Execution Time': number }[] }[]>(`explain (analyze, timing off, format json) ${sql}`, params)
    const [plan] = row?.['QUERY PLAN'] ?? []
    if (!plan) throw new Error('PostgreSQL explained nothing')
    sum += plan['Planning Time'] + plan['Execution Time']
    return (connection.execute as (...given: unknown[]) => Promise<unknown>)(sql, params, ...rest)
  }
  const watched = new Proxy(em, { get: (of, name) => name === 'getConnection' ? () => ({ execute }) : Reflect.get(of, name, of) as unknown })
  return { watched, spent: () => sum }
}
