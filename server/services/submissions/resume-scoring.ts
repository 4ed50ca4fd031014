import type { App } from '#server/utils/app'
import { scoreSubmission } from './score-submission'

/**
 * Scores at once what a worker was scoring when it died, instead of waiting for its jobs to run out. For a worker that starts: its
 * predecessor is gone. Where another worker really is at one of them both score it, and one of the two finds it done.
 */
export async function resumeScoring(app: Pick<App, 'orm' | 'clock'>): Promise<void> {
  const left = await app.orm.em.fork().getConnection().execute<{ id: string }[]>('select distinct data ->> \'submissionId\' as id from pgboss.job where name = \'score-submission\' and state = \'active\'')
  for (const { id } of left) await scoreSubmission(app, id)
}
