import type { EntityManager } from '@mikro-orm/postgresql'
import { Review } from '#server/db/entities/Review'
import { Submission } from '#server/db/entities/Submission'
import type { Actor } from '#server/utils/actor'
import type { App } from '#server/utils/app'
import { Refusal } from '#server/utils/refusal'

/** Notes that the student read what was said of a submission; the first time counts. @throws {Refusal} submission_not_found */
export async function readFeedback(em: EntityManager, app: App, actor: Actor, submissionId: string): Promise<{ read: number }> {
  const own = await em.findOne(Submission, { id: submissionId, head: { student: actor.id } })
  if (!own) throw new Refusal('submission_not_found')
  if (own.state !== 'decided') return { read: 0 }
  return { read: await em.nativeUpdate(Review, { submission: own.id, readAt: null }, { readAt: app.clock.schoolNow() }) }
}
