import type { EntityManager } from '@mikro-orm/postgresql'
import type { CriterionState } from '#shared/domain/rubric/criterion'

/** How many criteria of each submission stand in each state; a criterion counts once, with its worst result. */
export async function queueStates(em: EntityManager, submissionIds: readonly string[]): Promise<Map<string, Record<CriterionState, number>>> {
  const counts = new Map<string, Record<CriterionState, number>>()
  if (submissionIds.length === 0) return counts
  const rows = await em.getConnection().execute<{ submission: string, worst: number, n: number }[]>(
    `select submission, worst, count(*)::int as n from (
       select s.id as submission, r.criterion, min(array_position(array['reject', 'not-assessed', 'borderline', 'accept', 'does-not-apply'], r.state::text)) as worst
       from submission s join score_set c on c.submission_id = s.id and c.version = s.scored_version join criterion_result r on r.set_id = c.id
       where s.id = any(?) group by s.id, r.criterion) as criteria
     group by submission, worst`, [`{${submissionIds.join(',')}}`])
  const order: CriterionState[] = ['reject', 'not-assessed', 'borderline', 'accept', 'does-not-apply']
  for (const { submission, worst, n } of rows) {
    const own = counts.get(submission) ?? { 'accept': 0, 'borderline': 0, 'reject': 0, 'not-assessed': 0, 'does-not-apply': 0 }
    const state = order[worst - 1]
    if (state) own[state] += n
    counts.set(submission, own)
  }
  return counts
}
