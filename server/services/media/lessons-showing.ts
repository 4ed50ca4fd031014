import type { EntityManager } from '@mikro-orm/postgresql'

/** Ids of the lessons of which a published version, the newest or an older one, shows this picture or film; in order. */
export async function lessonsShowing(em: EntityManager, mediaId: string): Promise<string[]> {
  // With the operator, so that the index on the documents serves it; the id is a UUID of ours and ends no string.
  const rows = await em.getConnection().execute<{ lesson_id: string }[]>('select distinct lesson_id from lesson_version where document @\\? ?::jsonpath order by lesson_id', [`$.**.asset ? (@ == "${mediaId}")`], 'all', em.getTransactionContext())
  return rows.map(row => row.lesson_id)
}
