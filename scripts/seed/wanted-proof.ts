import { criteriaOfPart } from '#shared/domain/rubric/covers'
import type { Criterion, RubricStage } from '#shared/domain/rubric/criterion'
import { doesNotApplyBecause } from '#shared/domain/rubric/does-not-apply'
import type { EvidenceSet } from '#shared/domain/rubric/evidence'
import { unitsOf } from '#shared/domain/rubric/units-of'
import { wantedOf, type WantedItem } from '#shared/domain/rubric/wanted'
import type { Side } from '#shared/domain/units/port'
import type { SpotToRead } from './iron'

export interface PhotoToTake { view: string, cylinder: number | null, side: Side | null, spot: string | null, note: string | null }
export interface WantedProof { readings: SpotToRead[], photos: PhotoToTake[], documents: string[] }

/** Whose photos are taken: all that are wanted, or those without which a stop cannot be released. */
export type PhotosTaken = 'all' | 'stops'

/**
 * What a student brings for a part of a stage: every reading, photo and paper that is still wanted, spelled out spot by spot.
 * Flow sheets are the story's own.
 */
export function wantedProof(stage: RubricStage, evidence: EvidenceSet, firstCylinder: number, photosTaken: PhotosTaken): WantedProof {
  const wanted = wantedOf(stage, evidence)
  const stops = new Set(stage.criteria.filter(one => one.safetyStop).map(one => one.id))
  const photos = wanted.filter(item => item.kind === 'photo' && (photosTaken === 'all' || item.criteria.some(id => stops.has(id))))
  const typed = typedForPhotos(stage, evidence, firstCylinder)
  const alsoTyped = new Set(typed.map(one => one.quantity))
  const readings = [...wanted.filter(item => item.kind === 'reading' && !alsoTyped.has(item.quantity ?? '')).flatMap(item => spotsOf(item, evidence, firstCylinder)), ...typed]
  const seen = new Set<string>()
  return {
    readings: readings.filter((one) => {
      const key = [one.quantity, one.cylinder, one.side, one.spot, one.when, one.instrument].join('|')
      return !seen.has(key) && seen.add(key)
    }),
    photos: photos.flatMap(({ view, cylinder, side, spot, note, count, have }) => Array.from({ length: Math.max(0, count - have) }, () => ({ view: view ?? '', cylinder, side, spot, note }))),
    documents: wanted.filter(item => item.kind === 'document' && item.have < item.count).map(item => item.note ?? 'paper'),
  }
}

/** A want without spots is a whole map or schedule where the card has one. */
function spotsOf(item: WantedItem, evidence: EvidenceSet, firstCylinder: number): SpotToRead[] {
  if (item.have >= item.count && item.spotsLeft.length === 0) return []
  const one: SpotToRead = { quantity: item.quantity ?? '', op: evidence.op, cylinder: item.cylinder, side: item.side, spot: item.spot, when: item.when, count: item.count }
  if (/\bultrasonic\b/.test(item.spot ?? '')) return [{ ...one, cylinder: firstCylinder, side: 'intake', spot: 'bowl, fore', instrument: 'ultrasonic' }]
  if (item.spot === null && item.spotsLeft.length > 0) return item.spotsLeft.map(spot => ({ ...one, cylinder: item.cylinder ?? firstCylinder, spot }))
  // A want of one side of the head is read at the cylinder worked first.
  return [item.side !== null && item.cylinder === null ? { ...one, cylinder: firstCylinder } : one]
}

/** What is read from a picture or a mould and typed, although no reading is named among what is wanted. */
function typedForPhotos(stage: RubricStage, evidence: EvidenceSet, firstCylinder: number): SpotToRead[] {
  return criteriaOfPart(stage, evidence.part)
    .filter(one => (one.kind === 'photo-measured' || one.kind === 'measured') && !one.wants.some(want => want.kind === 'reading') && doesNotApplyBecause(one, evidence) === null)
    .flatMap(criterion => unitsOf(criterion, evidence).flatMap((unit): SpotToRead[] =>
      placesOf(criterion).map(spot => ({
        quantity: criterion.quantity, op: evidence.op, cylinder: unit.side !== null && unit.cylinder === null ? firstCylinder : unit.cylinder, side: unit.side, spot, when: null, count: 1,
      }))))
}

const clockOf: Readonly<Record<string, string>> = { 'bore-line-margin': '8', 'shroud-gap': '7' }

function placesOf(criterion: Criterion): (string | null)[] {
  const places = criterion.wants.flatMap(want => want.places ?? [])
  return places.length > 0 ? places : [clockOf[criterion.quantity] ?? null]
}
