import type { EntityManager, Loaded } from '@mikro-orm/postgresql'
import { Clearance } from '#server/db/entities/Clearance'
import { schoolDay } from '#shared/contract/school-day'
import type { ClearanceOne } from '#shared/contract/safety'

/** Clearances that were not withdrawn, of each of these people: one a tool, the one that runs longest. */
export async function standingClearances(em: EntityManager, people: readonly string[], now: Date): Promise<Map<string, ClearanceOne[]>> {
  const rows = await em.find(Clearance, { person: { $in: [...people] }, withdrawnAt: null }, { populate: ['givenBy'], orderBy: { tool: 'asc', until: 'desc' } })
  const standing = new Map<string, ClearanceOne[]>(people.map(id => [id, []]))
  for (const row of rows) {
    const own = standing.get(row.person.id)
    if (own && !own.some(one => one.tool === row.tool)) own.push(viewClearance(row, now))
  }
  return standing
}

/** `until` is the last day it may be used on. */
export function viewClearance(row: Loaded<Clearance, 'givenBy'>, now: Date): ClearanceOne {
  return { id: row.id, tool: row.tool, from: schoolDay(row.from), until: schoolDay(new Date(row.until.getTime() - 1)), lapsed: row.until <= now, givenBy: row.givenBy.$.name }
}
