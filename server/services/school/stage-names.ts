import type { EntityManager } from '@mikro-orm/postgresql'

/** Names of the stages of some rubric versions, by version's id and op: lists need no more of a rubric, which is large. */
export async function stageNames(em: EntityManager, rubricIds: readonly string[]): Promise<(rubricId: string, op: number) => string> {
  const ids = [...new Set(rubricIds)]
  const rows = ids.length === 0
    ? []
    : await em.getConnection().execute<{ id: string, op: number, name: string }[]>(
        `select v.id, (s.value->>'op')::int as op, s.value->>'name' as name from rubric_version v, jsonb_array_elements(v.rubric->'stages') s where v.id = any(?)`, [`{${ids.join(',')}}`], 'all', em.getTransactionContext())
  const names = new Map(rows.map(row => [`${row.id}|${row.op}`, row.name]))
  return (rubricId, op) => names.get(`${rubricId}|${op}`) ?? ''
}
