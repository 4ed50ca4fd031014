import type { EntityManager } from '@mikro-orm/postgresql'
import { Consent } from '#server/db/entities/Consent'
import { User } from '#server/db/entities/User'
import type { Actor } from '#server/utils/actor'
import type { App } from '#server/utils/app'
import { recordEvent } from '#server/utils/record-event'
import { Refusal } from '#server/utils/refusal'
import type { ConsentInput, ConsentView } from '#shared/contract/safety'
import { newestConsentText } from './newest-consent-text'
import { refuseUnknownChoices, writeChoices } from './choose-sharing'
import { writeSafetyNote } from './change-safety-note'
import { viewConsent } from './view-consent'

/**
 * Keeps that a person read the safety form and ticked every clause of it, with their choices, first-aid words and boot size.
 *
 * @throws {Refusal} consent_text_missing, consent_stale, ticks_missing, choice_unknown, or consent_signed for the same version again
 */
export async function signConsent(em: EntityManager, app: App, actor: Actor, input: ConsentInput): Promise<ConsentView> {
  return em.transactional(async (tx) => {
    const text = await newestConsentText(tx)
    if (input.version !== text.version) throw new Refusal('consent_stale', undefined, { version: text.version })
    const missing = text.clauses.filter(clause => !input.ticks.includes(clause.code))
    if (missing.length > 0) throw new Refusal('ticks_missing', undefined, { issues: missing.map(clause => ({ path: `ticks.${clause.code}`, message: `Tick "${clause.title}".` })) })
    refuseUnknownChoices(text, Object.keys(input.choices))

    const at = app.clock.schoolNow()
    // The unique index decides between two taps at once.
    const signed = await tx.createQueryBuilder(Consent).insert({
      id: crypto.randomUUID(),
      person: tx.getReference(User, actor.id),
      text,
      ticks: text.clauses.map(clause => clause.code),
      signedAs: input.signedAs,
      guardian: input.guardian === '' ? null : input.guardian,
      at,
    }).onConflict(['person', 'text']).ignore().execute('run')
    if (signed.affectedRows === 0) throw new Refusal('consent_signed')
    await writeChoices(tx, actor, input.choices, at)
    await writeSafetyNote(tx, actor, input, at)
    recordEvent(tx, { actor: actor.id, action: 'consent-signed', subject: `person:${actor.id}`, detail: { version: text.version, guardian: input.guardian !== '' } })
    await tx.flush()
    return viewConsent(tx, app, actor)
  })
}
