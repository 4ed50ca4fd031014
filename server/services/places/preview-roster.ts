import { createHash } from 'node:crypto'
import type { EntityManager } from '@mikro-orm/postgresql'
import { BenchPlace } from '#server/db/entities/BenchPlace'
import { Cohort } from '#server/db/entities/Cohort'
import { canonicalJson } from '#server/utils/canonical-json'
import { Refusal } from '#server/utils/refusal'
import type { RosterPreview } from '#shared/contract/places'
import { liveStates, takesBench } from './place-states'
import { readRoster } from './read-roster'

/**
 * A list of people as it would be taken into a cohort: every row with what is wrong with it. Keeps nothing.
 *
 * `seen` stands for the list and everything the answer rests on; a list is taken only as it was seen.
 *
 * @throws {Refusal} cohort_not_found, roster_unreadable
 */
export async function previewRoster(em: EntityManager, code: string, csv: string): Promise<RosterPreview> {
  const cohort = await em.findOne(Cohort, { code })
  if (!cohort) throw new Refusal('cohort_not_found')
  const rows = readRoster(csv)
  const places = await em.find(BenchPlace, { cohort: cohort.id, state: { $in: [...liveStates, 'finished'] } }, { populate: ['person'] })
  const there = new Set(places.flatMap(place => [place.email.toLowerCase(), place.person?.$.email.toLowerCase() ?? '']).filter(email => email !== ''))
  const free = cohort.places - places.filter(place => takesBench(place.state)).length
  for (const row of rows) if (there.has(row.email)) row.problems.push('This person is in the cohort or on its list already.')
  // Only rows that can be taken use up places, in the order of the list.
  rows.filter(row => row.problems.length === 0).slice(Math.max(0, free)).forEach(row => row.problems.push('No place is left for this row.'))
  const bad = rows.filter(row => row.problems.length > 0).length
  const seen = createHash('sha256').update(canonicalJson({ cohort: cohort.id, csv, rows, free })).digest('hex')
  return { rows, good: rows.length - bad, bad, free: Math.max(0, free), seen }
}
