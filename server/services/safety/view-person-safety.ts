import type { EntityManager } from '@mikro-orm/postgresql'
import { Clearance } from '#server/db/entities/Clearance'
import { Consent, SafetyNote } from '#server/db/entities/Consent'
import { hasRole, type Actor } from '#server/utils/actor'
import type { App } from '#server/utils/app'
import { Refusal } from '#server/utils/refusal'
import type { PersonSafetyView } from '#shared/contract/safety'
import { viewClearance } from './clearance-views'
import { clearanceRow } from './list-clearances'
import { newestConsentText } from './newest-consent-text'
import { standingChoices } from './view-consent'

/** One person for the safety officer: clearances that were and are, what was signed, what may be shared. First aid is the safety officer's alone. @throws {Refusal} person_not_found */
export async function viewPersonSafety(em: EntityManager, app: App, actor: Actor, id: string): Promise<PersonSafetyView> {
  const row = await clearanceRow(em, app, id)
  if (!row) throw new Refusal('person_not_found')
  const now = app.clock.schoolNow()
  const history = await em.find(Clearance, { person: id }, { populate: ['givenBy'], orderBy: { from: 'desc', tool: 'asc' } })
  const signed = await em.find(Consent, { person: id }, { populate: ['text'], orderBy: { at: 'desc' } })
  const choices = await standingChoices(em, id)
  const note = await em.findOne(SafetyNote, { person: id })
  const text = await newestConsentText(em)
  return {
    ...row,
    today: now.toISOString(),
    history: history.map(one => ({ ...viewClearance(one, now), withdrawnAt: one.withdrawnAt?.toISOString() ?? null })),
    signed: signed.map(one => ({ version: one.text.$.version, at: one.at.toISOString(), as: one.signedAs, guardian: one.guardian ?? null })),
    sharing: text.choices.map(({ code, text: words }) => ({ code, text: words, allowed: choices.get(code)?.allowed ?? false, at: choices.get(code)?.at.toISOString() ?? null })),
    bootSize: note?.bootSize ?? '',
    firstAid: hasRole(actor, 'safety') ? note?.firstAid ?? '' : null,
  }
}
