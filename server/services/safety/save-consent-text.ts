import { UniqueConstraintViolationException } from '@mikro-orm/core'
import type { EntityManager } from '@mikro-orm/postgresql'
import { ConsentText } from '#server/db/entities/Consent'
import { User } from '#server/db/entities/User'
import type { Actor } from '#server/utils/actor'
import type { App } from '#server/utils/app'
import { enqueue } from '#server/utils/enqueue'
import { recordEvent } from '#server/utils/record-event'
import { Refusal } from '#server/utils/refusal'
import { sameSafetyClauses, type ConsentTextInput, type ConsentTextView } from '#shared/contract/safety'

/**
 * Saves the next version of the safety form. Where a safety clause is new, gone or says something else, nobody's signature stands any
 * more and everybody is asked again; else what was signed goes on standing.
 *
 * @throws {Refusal} consent_text_stale when another version was saved since
 */
export async function saveConsentText(em: EntityManager, app: App, actor: Actor, input: ConsentTextInput): Promise<ConsentTextView> {
  try {
    return await em.transactional(async (tx) => {
      const [before] = await tx.find(ConsentText, {}, { orderBy: { version: 'desc' }, limit: 1 })
      if ((before?.version ?? 0) !== input.after) throw new Refusal('consent_text_stale', undefined, { version: before?.version ?? 0 })
      const version = input.after + 1
      const asksAgain = !before || !sameSafetyClauses(before.clauses, input.clauses)
      const text = tx.create(ConsentText, { version, clauses: input.clauses, choices: input.choices, standsFrom: asksAgain ? version : before.standsFrom, savedBy: tx.getReference(User, actor.id), savedAt: app.clock.schoolNow() })
      tx.persist(text)
      recordEvent(tx, { actor: actor.id, action: 'consent-text-saved', subject: `consent-text:${version}`, detail: { version, asksAgain } })
      // Who signed before hears of it by the next reminders.
      if (before && asksAgain) await enqueue(app, tx, 'send-reminders', {})
      await tx.flush()
      return toConsentTextView(text, actor.name)
    })
  }
  catch (thrown) {
    // Two at the same moment: the second finds its version taken.
    if (thrown instanceof UniqueConstraintViolationException) throw new Refusal('consent_text_stale')
    throw thrown
  }
}

export function toConsentTextView(text: ConsentText, savedBy: string | null): ConsentTextView {
  return { version: text.version, clauses: text.clauses, choices: text.choices, standsFrom: text.standsFrom, savedAt: text.savedAt.toISOString(), savedBy }
}
