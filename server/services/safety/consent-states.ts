import type { EntityManager } from '@mikro-orm/postgresql'
import type { ConsentState } from '#shared/contract/safety'

/**
 * Whether each of these people signed the safety form as it stands: a version no older than the last change of a safety clause.
 * Where the school has no form nobody has signed one.
 */
export async function consentStates(em: EntityManager, people: readonly string[]): Promise<Map<string, ConsentState>> {
  const states = new Map<string, ConsentState>(people.map(id => [id, 'none']))
  if (people.length === 0) return states
  const rows = await em.getConnection().execute<{ person_id: string, stands: boolean }[]>(
    `select c."person_id", max(t."version") >= (select "stands_from" from "consent_text" order by "version" desc limit 1) as stands
     from "consent" c join "consent_text" t on t."id" = c."text_id" where c."person_id" = any(?::uuid[]) group by c."person_id"`,
    [`{${[...states.keys()].join(',')}}`], 'all', em.getTransactionContext())
  for (const row of rows) states.set(row.person_id, row.stands ? 'signed' : 'asked again')
  return states
}

/** The same of one person. */
export async function consentState(em: EntityManager, person: string): Promise<ConsentState> {
  return (await consentStates(em, [person])).get(person) ?? 'none'
}
