import { readFileSync } from 'node:fs'
import type { CastingCard } from '#shared/domain/geometry/casting'
import type { Criterion, Rubric, RubricStage } from '#shared/domain/rubric/criterion'
import type { EvidenceSet, ReadingEvidence } from '#shared/domain/rubric/evidence'
import type { Side } from '#shared/domain/units/port'

const read = <T>(name: string): T => JSON.parse(readFileSync(new URL(`../../../content/school/${name}`, import.meta.url), 'utf8')) as T

/** The school's rubric and castings, as a fresh school starts with them. */
export const rubric = read<Rubric>('rubric.json')
const castings = read<CastingCard[]>('castings.json')

export function casting(scope: 'D' | 'W'): CastingCard {
  const found = castings.find(one => one.scope === scope)
  if (!found) throw new Error(`no casting ${scope}`)
  return found
}

export function stageOf(code: string): RubricStage {
  const found = rubric.stages.find(stage => stage.code === code)
  if (!found) throw new Error(`no stage ${code}`)
  return found
}

export function criterionOf(id: string): Criterion {
  const found = rubric.stages.flatMap(stage => stage.criteria).find(criterion => criterion.id === id)
  if (!found) throw new Error(`no criterion ${id}`)
  return found
}

/** Evidence of a Dunnock with nothing in it, at one port. */
export function nothing(op: number, more: Partial<EvidenceSet> = {}): EvidenceSet {
  return {
    casting: casting('D'), op, part: 'rest', ports: [{ cylinder: 1, side: 'intake' }], readings: [], photos: [], documents: [], sheets: [],
    judged: [], acidCleaned: null, handAllowanceMm: 0.15, ...more,
  }
}

let made = 0

/** One reading of cylinder 1 intake at op 70 unless told otherwise. */
export function reading(quantity: string, spot: string | null, value: number | number[], more: Partial<ReadingEvidence> = {}): ReadingEvidence {
  made += 1
  return {
    id: `reading-${made}`, quantity, op: 70, cylinder: 1, side: 'intake' as Side, spot, when: null,
    values: Array.isArray(value) ? value : [value], unit: 'mm', instrument: 'test gauge', expandedU: 0.01, takenAt: made, ...more,
  }
}

/** Every photo a criterion of the stage wants, of every covered port, so that a test is about its readings. */
export function allPhotos(evidence: EvidenceSet): EvidenceSet['photos'] {
  const stage = rubric.stages.find(one => one.op === evidence.op)
  const wants = (stage?.criteria ?? []).flatMap(criterion => criterion.wants).filter(want => want.kind === 'photo')
  return wants.flatMap((want, index) => (want.places ?? [null]).flatMap(spot => evidence.ports.flatMap(port => Array.from({ length: want.count }, (_, n) => ({
    id: `photo-${index}-${spot}-${port.cylinder}-${port.side}-${n}`, view: want.view ?? '', op: evidence.op,
    cylinder: port.cylinder, side: want.per === 'port' || want.side !== undefined ? want.side ?? port.side : null, spot, takenAt: 1,
  })))))
}
