import type { EntityManager } from '@mikro-orm/postgresql'
import { queues } from '#server/utils/queues'
import type { StuckJobView } from '#shared/contract/views'

export interface JobRow { id: string, name: string, state: string, data: Record<string, unknown> | null, retry_count: number, output: unknown, created_on: Date, last_on: Date | null }

/** Tries after which waiting for the next one is worth telling somebody. */
const triesWorthTelling = 3

const columns = `id, name, state::text, data, retry_count, output, created_on, coalesce(completed_on, started_on) as last_on`

/**
 * Jobs that failed for good, or keep failing, in the job tables (the library moves old rows to its archive after half a day), and
 * messages no mail server will ever take, whose job is over.
 */
const stuck = `select ${columns} from pgboss.job where name = any(?) and (state = 'failed' or (state = 'retry' and retry_count >= ${triesWorthTelling}))
  union all select ${columns} from pgboss.archive where name = any(?) and state = 'failed' and archived_on > now() - interval '14 days'
  union all select id, 'send-mail', 'failed', jsonb_build_object('mailId', id), tries - 1, jsonb_build_object('message', problem), created_at, created_at from mail where state = 'dead'`

/** Stuck work, newest first, at most 200. */
export async function listStuckJobs(em: EntityManager): Promise<StuckJobView[]> {
  const names = `{${Object.keys(queues).join(',')}}`
  const rows = await em.getConnection().execute<JobRow[]>(`select * from (${stuck}) as stuck order by created_on desc, id limit 200`, [names, names])
  return rows.map(row => ({
    id: row.id,
    kind: row.name,
    state: row.state === 'failed' ? 'failed' : 'waiting to be tried again',
    data: row.data ?? {},
    tries: row.retry_count + 1,
    problem: problemOf(row.output),
    createdAt: new Date(row.created_on).toISOString(),
    lastAt: row.last_on === null ? null : new Date(row.last_on).toISOString(),
  }))
}

/** The handler's message, without its stack: what was thrown is in the server's log whole. */
function problemOf(output: unknown): string {
  const inner = (output as { value?: unknown } | null)?.value ?? output
  const message = (inner as { message?: unknown } | null)?.message
  return typeof message === 'string' ? message : 'It gave no reason.'
}
