import type { EntityManager } from '@mikro-orm/postgresql'
import { SharingChoice, type ConsentText } from '#server/db/entities/Consent'
import { User } from '#server/db/entities/User'
import type { Actor } from '#server/utils/actor'
import type { App } from '#server/utils/app'
import { recordEvent } from '#server/utils/record-event'
import { Refusal } from '#server/utils/refusal'
import type { ChoiceInput, ConsentView } from '#shared/contract/safety'
import { newestConsentText } from './newest-consent-text'
import { standingChoices, viewConsent } from './view-consent'

/** A yes or no to one kind of sharing, any day, signed or not. It counts from this moment. @throws {Refusal} consent_text_missing or choice_unknown */
export async function chooseSharing(em: EntityManager, app: App, actor: Actor, { code, allowed }: ChoiceInput): Promise<ConsentView> {
  return em.transactional(async (tx) => {
    refuseUnknownChoices(await newestConsentText(tx), [code])
    await writeChoices(tx, actor, { [code]: allowed }, app.clock.schoolNow())
    await tx.flush()
    return viewConsent(tx, app, actor)
  })
}

export function refuseUnknownChoices(text: ConsentText, codes: readonly string[]): void {
  const unknown = codes.find(code => !text.choices.some(choice => choice.code === code))
  if (unknown !== undefined) throw new Refusal('choice_unknown', undefined, { issues: [{ path: `choices.${unknown}`, message: 'is not a choice of this form' }] })
}

/** Writes a row for each choice that says something new: a no where nothing was said before says nothing. */
export async function writeChoices(tx: EntityManager, actor: Actor, choices: Record<string, boolean>, at: Date): Promise<void> {
  const codes = Object.keys(choices)
  if (codes.length === 0) return
  const before = await standingChoices(tx, actor.id)
  for (const code of codes) {
    const allowed = choices[code] === true
    if (allowed === (before.get(code)?.allowed ?? false)) continue
    tx.persist(tx.create(SharingChoice, { person: tx.getReference(User, actor.id), code, allowed, at }))
    recordEvent(tx, { actor: actor.id, action: allowed ? 'sharing-allowed' : 'sharing-taken-back', subject: `person:${actor.id}`, detail: { code } })
  }
}
