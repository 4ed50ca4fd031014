import type { EntityManager } from '@mikro-orm/postgresql'
import { headsUnderWay } from './head-under-way'

/** The version of one lesson somebody reads, and the newest there is: another while they keep to an older one. */
export interface VersionFor { lesson: string, version: number, newest: number }

/**
 * Which version of each lesson a person reads. The newest, but for a student mid-head whose lesson changed since the head was handed
 * out: they keep the one they began with until the head is done. What a head before this one kept does not count.
 */
export async function versionsFor(em: EntityManager, person: string, lesson?: string): Promise<Map<string, VersionFor>> {
  const run = <Row extends object>(sql: string, params: unknown[]) => em.getConnection().execute<Row[]>(sql, params, 'all', em.getTransactionContext())
  const newest = await run<{ lesson_id: string, version: number }>(`select lesson_id, max(version) as version from lesson_version ${lesson === undefined ? '' : 'where lesson_id = ?'} group by lesson_id`, lesson === undefined ? [] : [lesson])
  const found = new Map(newest.map(one => [one.lesson_id, { lesson: one.lesson_id, version: one.version, newest: one.version }]))
  const head = (await headsUnderWay(em, person)).get(person)
  if (!head) return found
  const kept = await run<{ lesson_id: string, version: number }>(`
    select progress.lesson_id, kept.version
      from lesson_progress progress
      join lesson_version kept on kept.id = progress.kept_id
      join lesson_version next on next.lesson_id = kept.lesson_id and next.version = kept.version + 1
     where progress.person_id = ? and next.published_at > ?`, [person, head.receivedAt])
  for (const one of kept) {
    const entry = found.get(one.lesson_id)
    if (entry) entry.version = one.version
  }
  return found
}
