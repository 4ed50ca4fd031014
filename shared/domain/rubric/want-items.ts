import type { Criterion, Want } from './criterion'
import type { EvidenceSet } from './evidence'
import { pickBands } from './pick-band'
import { allReadingsOf, isOf } from './readings-of'
import { sameSpot } from './same-spot'
import type { Side } from '../units/port'

/** One piece of wanted proof of one criterion: a want at one port, cylinder or head and one spot. */
export interface WantItem {
  kind: Want['kind']
  view: string | null
  quantity: string | null
  cylinder: number | null
  side: Side | null
  spot: string | null
  when: 'before' | 'after' | null
  note: string | null
  count: number
  /** How many of it are in. */
  have: number
}

/**
 * Whether a want is asked for without anybody asking: its note may say "only where the rig allows" (never by itself) or
 * "only if asked" for ports after the first (by itself with the first article only).
 */
function isAskedFor(want: Want, evidence: EvidenceSet): boolean {
  const note = want.note ?? ''
  if (/\bonly where\b/.test(note)) return false
  return !/\bonly if asked\b/.test(note) || evidence.part === 'first'
}

/** Before the first cut only the readings of before it can be had. */
function isOfPart(want: Want, evidence: EvidenceSet): boolean {
  return evidence.part !== 'before' || want.when !== 'after'
}

/**
 * What a criterion wants, spread over the ports the part covers and over its spots, with how much of each is in.
 *
 * Nothing for ports the criterion has no band for.
 *
 * Source: handbook 3.6, `wants`.
 */
export function wantItems(criterion: Criterion, evidence: EvidenceSet): WantItem[] {
  return criterion.wants.filter(want => isAskedFor(want, evidence) && isOfPart(want, evidence)).flatMap(want =>
    unitsOfWant(want, criterion, evidence).flatMap(unit =>
      (want.places ?? [null]).map((spot): WantItem => {
        const item = {
          kind: want.kind, view: want.view ?? null, quantity: want.quantity ?? null,
          ...unit, spot, when: want.when ?? null, note: want.note ?? null, count: want.count,
        }
        return { ...item, have: countOf(item, (want.places ?? []).length, criterion, evidence) }
      })))
}

function unitsOfWant(want: Want, criterion: Criterion, evidence: EvidenceSet): { cylinder: number | null, side: Side | null }[] {
  const judged = evidence.ports.filter(port => (want.side === undefined || port.side === want.side)
    && pickBands(criterion, evidence.casting.scope, port.side).length > 0)
  switch (want.per) {
    case 'port': return judged
    case 'cylinder': {
      const cylinders = [...new Set(judged.map(port => port.cylinder))]
      // One picture of a chamber serves both sides.
      return cylinders.map(cylinder => ({ cylinder, side: want.kind === 'photo' ? null : want.side ?? null }))
    }
    case 'head': return want.side !== undefined && judged.length === 0 ? [] : [{ cylinder: null, side: want.side ?? null }]
  }
}

function countOf(item: Omit<WantItem, 'have'>, places: number, criterion: Criterion, evidence: EvidenceSet): number {
  const unit = { cylinder: item.cylinder, side: item.side }
  switch (item.kind) {
    case 'photo':
      return evidence.photos.filter(photo => photo.view === item.view && photo.op === evidence.op && isOf(photo, unit)
        // A picture that names no cylinder, or no side where a port is wanted, must not stand for every one of them.
        && (item.cylinder === null || (photo.cylinder !== null && (item.side === null || photo.side !== null)))
        // With one spot wanted, a photo that names none is of it.
        && (item.spot === null || sameSpot(photo.spot, item.spot) || (photo.spot === null && places === 1))).length
    case 'reading': {
      const readings = allReadingsOf(evidence, { quantity: item.quantity ?? '', unit, ...(item.when === null ? {} : { when: item.when }) })
      if (item.spot === null) return readings.reduce((sum, reading) => sum + (item.count > 1 ? reading.values.length : 1), 0)
      if (/\bultrasonic\b/.test(item.spot)) return readings.filter(reading => sameSpot(reading.spot, item.spot) || /ultrasonic/i.test(reading.instrument)).length
      return readings.filter(reading => sameSpot(reading.spot, item.spot)).length
    }
    case 'flow-sheet':
      return evidence.sheets.filter(sheet => sheet.op === evidence.op).flatMap(sheet => sheet.runs).filter(run => isOf(run, unit))
        // Several runs of one port on one sheet are several runs.
        .reduce((sum, run) => sum + (run.repeats?.length ?? 1), 0)
    case 'document': {
      const named = criterion.wants.map(want => want.note).filter(note => note !== undefined)
      return evidence.documents.filter(one => one.op === evidence.op && (sameSpot(one.note, item.note) || !named.some(note => note !== item.note && sameSpot(one.note, note)))).length
    }
  }
}
