import type { EntityManager } from '@mikro-orm/postgresql'
import { SafetyNote } from '#server/db/entities/Consent'
import { User } from '#server/db/entities/User'
import type { Actor } from '#server/utils/actor'
import type { App } from '#server/utils/app'
import { recordEvent } from '#server/utils/record-event'
import type { ConsentView, SafetyNoteInput } from '#shared/contract/safety'
import { viewConsent } from './view-consent'

/** First-aid words and boot size, changed or emptied by the person they are about. @throws {Refusal} consent_text_missing */
export async function changeSafetyNote(em: EntityManager, app: App, actor: Actor, input: SafetyNoteInput): Promise<ConsentView> {
  return em.transactional(async (tx) => {
    await writeSafetyNote(tx, actor, input, app.clock.schoolNow())
    await tx.flush()
    return viewConsent(tx, app, actor)
  })
}

/** The words themselves go nowhere else: not into the audit record, not into a mail. */
export async function writeSafetyNote(tx: EntityManager, actor: Actor, { firstAid, bootSize }: SafetyNoteInput, at: Date): Promise<void> {
  await tx.upsert(SafetyNote, { id: crypto.randomUUID(), person: tx.getReference(User, actor.id), firstAid, bootSize, changedAt: at }, { onConflictFields: ['person'], onConflictExcludeFields: ['id'] })
  recordEvent(tx, { actor: actor.id, action: 'safety-note-changed', subject: `person:${actor.id}`, detail: { firstAid: firstAid !== '', bootSize: bootSize !== '' } })
}
