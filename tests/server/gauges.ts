import { readFileSync } from 'node:fs'
import type { EntityManager } from '@mikro-orm/postgresql'
import { Instrument } from '#server/db/entities/Instrument'

interface WrittenInstrument { code: string, name: string, quantities: string[], expandedU: number, relative?: boolean, unit: string }

/** The school's own instruments, so that what is read here is read with what the school reads with. */
export async function lendGauges(em: EntityManager): Promise<void> {
  const written = JSON.parse(readFileSync(new URL('../../content/school/instruments.json', import.meta.url), 'utf8')) as WrittenInstrument[]
  await em.transactional(async (tx) => {
    for (const one of written) tx.persist(tx.create(Instrument, { ...one, relative: one.relative ?? false, dueOn: null, createdAt: new Date() }))
  })
}
