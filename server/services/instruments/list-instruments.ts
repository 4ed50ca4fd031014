import type { EntityManager } from '@mikro-orm/postgresql'
import { Instrument } from '#server/db/entities/Instrument'
import type { InstrumentView } from '#shared/contract/views'

/** The school's gauges with what each reads and its doubt, by name. */
export async function listInstruments(em: EntityManager): Promise<InstrumentView[]> {
  const instruments = await em.find(Instrument, {}, { orderBy: { name: 'asc' } })
  return instruments.map(({ code, name, quantities, expandedU, relative, unit, dueOn }) => ({ code, name, quantities, expandedU, relative, unit, due: dueOn ?? null }))
}
