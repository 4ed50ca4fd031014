import type { EntityManager } from '@mikro-orm/postgresql'
import { Sponsor } from '#server/db/entities/Sponsor'
import type { SponsorView } from '#shared/contract/places'

/** Sponsors by name, so that nobody types one twice. */
export async function listSponsors(em: EntityManager): Promise<SponsorView[]> {
  const sponsors = await em.find(Sponsor, {}, { orderBy: { organisation: 'asc' } })
  return sponsors.map(({ id, organisation, contact, email }) => ({ id, organisation, contact, email }))
}
