import type { EntityManager } from '@mikro-orm/core'
import { Consent, ConsentText, SafetyNote, SharingChoice } from '../entities/Consent'
import type { User } from '../entities/User'
import type { SchoolContent } from './content'

/**
 * The safety form, and who signed it: everybody of a cohort that has begun, on its first evening before the first tool turned.
 * Who moved to a cohort that is still to come has not.
 */
export function makeConsents(em: EntityManager, { scenario, start, consent }: SchoolContent, people: ReadonlyMap<string, User>, until: Date): void {
  const officer = scenario.staff.find(one => one.role === 'shop safety officer')
  const text = em.create(ConsentText, {
    version: 1, clauses: consent.clauses, choices: consent.choices, standsFrom: 1,
    savedBy: officer ? people.get(officer.name) ?? null : null, savedAt: new Date('2025-09-01T09:00:00Z'),
  })
  const ticks = consent.clauses.map(clause => clause.code)
  for (const { name, cohort, moved_to: movedTo } of scenario.students) {
    const person = people.get(name)
    const begins = scenario.cohorts.find(one => one.code === cohort)?.start
    const at = new Date(`${begins}T18:05:00Z`)
    if (!person || movedTo || !(at <= until)) continue
    em.create(Consent, { person, text, ticks, signedAs: name, guardian: null, at })
    const own = start.safety[name]
    for (const code of own?.shares ?? []) em.create(SharingChoice, { person, code, allowed: true, at })
    if (own) em.create(SafetyNote, { person, firstAid: own.firstAid, bootSize: own.bootSize, changedAt: at })
  }
  for (const { name, role } of scenario.staff) {
    const person = people.get(name)
    if (person && role !== 'school admin') em.create(Consent, { person, text, ticks, signedAs: name, guardian: null, at: new Date('2025-09-02T09:00:00Z') })
  }
}
