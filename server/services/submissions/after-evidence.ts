import type { EntityManager } from '@mikro-orm/postgresql'
import type { Submission } from '#server/db/entities/Submission'
import type { App } from '#server/utils/app'
import { enqueue } from '#server/utils/enqueue'
import { signal } from '#server/utils/signals'

/**
 * What follows a change of a submission's evidence, in the transaction that made it. The submission must be locked (`openForEvidence`).
 *
 * A draft only tells the pages that follow it. Once asked, the version is raised and it is scored again, so that what was scored and
 * what is there can be told apart.
 */
export async function afterEvidence(tx: EntityManager, app: Pick<App, 'boss'>, submission: Submission): Promise<void> {
  if (submission.state === 'asked' || submission.state === 'scored') {
    submission.version += 1
    submission.state = 'asked'
    // The job reads the version in a connection of its own.
    await tx.flush()
    await enqueue(app, tx, 'score-submission', { submissionId: submission.id })
  }
  await signal(tx, { kind: 'submission', id: submission.id })
}
