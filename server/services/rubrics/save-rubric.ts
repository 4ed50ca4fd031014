import type { EntityManager } from '@mikro-orm/postgresql'
import { RubricVersion } from '#server/db/entities/RubricVersion'
import { User } from '#server/db/entities/User'
import type { Actor } from '#server/utils/actor'
import type { App } from '#server/utils/app'
import { recordEvent } from '#server/utils/record-event'
import { Refusal } from '#server/utils/refusal'
import type { RubricInput } from '#shared/contract/rubric-input'
import type { RubricView } from '#shared/contract/views'
import type { Rubric } from '#shared/domain/rubric/criterion'
import { unreachableMusts } from '#shared/domain/rubric/unreachable-musts'
import { viewRubric } from './view-rubric'

/**
 * Saves a rubric as the next version. Heads keep the version they began with; earlier versions never change.
 *
 * @throws {Refusal} must_unreachable naming each must that nothing could meet; rubric_stale when somebody saved meanwhile
 */
export async function saveRubric(em: EntityManager, app: Pick<App, 'clock'>, actor: Actor, input: RubricInput): Promise<RubricView> {
  const unreachable = unreachableMusts(input.rubric as Rubric)
  if (unreachable.length > 0) {
    throw new Refusal('must_unreachable', `Nothing could be accepted for ${unreachable.map(one => `${one.criterion} (${one.scope})`).join(', ')}.`, {
      issues: unreachable.map(one => ({ path: one.criterion, message: `${one.scope}: ${one.why}` })),
    })
  }
  return em.transactional(async (tx) => {
    // One at a time, so that two writers never take the same number.
    await tx.getConnection().execute('select pg_advisory_xact_lock(hashtextextended(?, 2))', ['rubric'], 'run', tx.getTransactionContext())
    const [newest] = await tx.find(RubricVersion, {}, { fields: ['version'], orderBy: { version: 'desc' }, limit: 1 })
    const before = newest?.version ?? 0
    if (before !== input.after) throw new Refusal('rubric_stale', `Version ${before} is the newest, and this one was begun from version ${input.after}.`)
    const version = before + 1
    const saved = tx.create(RubricVersion, { version, rubric: { ...input.rubric, version, note: input.note } as Rubric, note: input.note, savedBy: tx.getReference(User, actor.id), savedAt: app.clock.schoolNow() })
    tx.persist(saved)
    recordEvent(tx, { actor: actor.id, action: 'rubric-saved', subject: `rubric:${version}`, detail: { after: before } })
    await tx.flush()
    return viewRubric(tx, version)
  })
}
