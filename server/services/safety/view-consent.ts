import type { EntityManager } from '@mikro-orm/postgresql'
import { Consent, SafetyNote, SharingChoice, type ConsentClause } from '#server/db/entities/Consent'
import type { Actor } from '#server/utils/actor'
import type { App } from '#server/utils/app'
import type { ConsentView } from '#shared/contract/safety'
import { standingClearances } from './clearance-views'
import { consentState } from './consent-states'
import { newestConsentText } from './newest-consent-text'

/** The safety form as this person has it before them: its newest text, what they signed and what they let be shared. @throws {Refusal} consent_text_missing */
export async function viewConsent(em: EntityManager, app: Pick<App, 'clock'>, actor: Actor): Promise<ConsentView> {
  const text = await newestConsentText(em)
  const [last] = await em.find(Consent, { person: actor.id }, { populate: ['text'], orderBy: { text: { version: 'desc' } }, limit: 1 })
  const allowed = await standingChoices(em, actor.id)
  const note = await em.findOne(SafetyNote, { person: actor.id })
  return {
    version: text.version,
    clauses: text.clauses.map(({ code, title, text: words }) => ({ code, title, text: words })),
    choices: text.choices.map(({ code, text: words }) => ({ code, text: words, allowed: allowed.get(code)?.allowed ?? false })),
    state: await consentState(em, actor.id),
    signed: last ? { version: last.text.$.version, at: last.at.toISOString(), as: last.signedAs, guardian: last.guardian ?? null } : null,
    changed: last ? changedClauses(last.text.$.clauses, text.clauses) : [],
    firstAid: note?.firstAid ?? '',
    bootSize: note?.bootSize ?? '',
    clearances: (await standingClearances(em, [actor.id], app.clock.schoolNow())).get(actor.id) ?? [],
  }
}

/** The newest yes or no of a person to each kind of sharing. */
export async function standingChoices(em: EntityManager, person: string): Promise<Map<string, SharingChoice>> {
  const choices = await em.find(SharingChoice, { person }, { orderBy: { at: 'asc', id: 'asc' } })
  return new Map(choices.map(choice => [choice.code, choice]))
}

/** Codes of clauses that are new or say something else. */
function changedClauses(before: readonly ConsentClause[], now: readonly ConsentClause[]): string[] {
  return now.filter((clause) => {
    const old = before.find(one => one.code === clause.code)
    return old?.title !== clause.title || old?.text !== clause.text
  }).map(clause => clause.code)
}
