import type { EntityManager } from '@mikro-orm/postgresql'
import { z } from 'zod'
import { SchoolSetting } from '#server/db/entities/SchoolSetting'

export interface SchoolDetails { name: string, address: string, currency: string }

const kept = z.object({ name: z.string().min(1), place: z.string().default(''), currency: z.string().length(3).default('GBP') })

/** The school's own name and address, for its papers. A school that has not said them is "The school". */
export async function schoolDetails(em: EntityManager): Promise<SchoolDetails> {
  const setting = await em.findOne(SchoolSetting, { name: 'school' })
  const read = kept.safeParse(setting?.value)
  if (!read.success) return { name: 'The school', address: '', currency: 'GBP' }
  // The demo's content says of its address that it is invented; a letterhead does not.
  return { name: read.data.name, address: read.data.place.replace(/\s*\(invented\)$/, ''), currency: read.data.currency }
}
