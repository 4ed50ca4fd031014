import { wallSpots } from '../geometry/wall-spots'
import type { Criterion, RubricStage } from './criterion'
import { criteriaOfPart } from './covers'
import { doesNotApplyBecause } from './does-not-apply'
import type { EvidenceSet } from './evidence'
import { allReadingsOf } from './readings-of'
import { sameSpot } from './same-spot'
import { unitsOf } from './units-of'
import { wantItems, type WantItem } from './want-items'
import { wantInWords } from './want-in-words'
import { viewNames } from './words'

/** One line of the Proof tray. */
export interface WantedItem extends WantItem {
  viewName: string | null
  /** What to take or read, and where: "seat land at 1:30, cylinder 2 intake". */
  title: string
  /** Criteria that want it. */
  criteria: string[]
  /** Spots of the casting card still unread, where the want is a whole map or schedule; else empty. */
  spotsLeft: string[]
}

/**
 * The wanted proof of one part of a stage, with what is in: what the Proof tray shows and a refusal lists.
 *
 * The same want of several criteria stands once, with the largest count; wants of one criterion that differ by their note alone add up.
 * In the order the rubric names them.
 *
 * Source: handbook 3.6.
 */
export function wantedOf(stage: RubricStage, evidence: EvidenceSet): WantedItem[] {
  const merged = new Map<string, WantedItem>()
  // Only the stage's own readings can be wanted proof of it; a head has many times as many.
  const own = { ...evidence, readings: evidence.readings.filter(one => one.op === evidence.op) }
  for (const criterion of criteriaOfPart(stage, evidence.part)) {
    if (doesNotApplyBecause(criterion, evidence) !== null) continue
    const items = new Map<string, WantItem>()
    for (const item of [...wantItems(criterion, own), ...typedForPhoto(criterion, own)]) {
      const key = keyOf(item)
      const before = items.get(key)
      items.set(key, before ? { ...before, count: before.count + item.count, note: joinNotes(before.note, item.note) } : item)
    }
    for (const [key, item] of items) {
      const before = merged.get(key)
      if (!before) merged.set(key, { ...item, ...described(item, own), criteria: [criterion.id] })
      else {
        before.count = Math.max(before.count, item.count)
        before.have = Math.max(before.have, item.have)
        before.note = joinNotes(before.note, item.note)
        before.criteria.push(criterion.id)
      }
    }
  }
  return [...merged.values()]
}

/**
 * What the rubric names no reading for but somebody has to read: until the program measures photos itself, a person types one at each
 * unit, wherever the worst is.
 */
function typedForPhoto(criterion: Criterion, evidence: EvidenceSet): WantItem[] {
  if ((criterion.kind !== 'photo-measured' && criterion.kind !== 'measured') || criterion.unit === 'yes/no') return []
  if (criterion.wants.some(want => want.kind === 'reading' || want.kind === 'flow-sheet')) return []
  return unitsOf(criterion, evidence).map(unit => ({
    kind: 'reading', view: null, quantity: criterion.quantity, ...unit, spot: null, when: null, note: 'read by you where it is worst; say where', count: 1,
    have: allReadingsOf(evidence, { quantity: criterion.quantity, unit }).length,
  }))
}

function keyOf(item: WantItem): string {
  return [item.kind, item.view, item.quantity, item.cylinder, item.side, item.spot, item.when, item.kind === 'document' ? item.note : ''].join('|')
}

function joinNotes(one: string | null, other: string | null): string | null {
  if (one === null || other === null || one.includes(other)) return one ?? other
  return other.includes(one) ? other : `${one}; ${other}`
}

function described(item: WantItem, evidence: EvidenceSet): Pick<WantedItem, 'viewName' | 'title' | 'spotsLeft'> {
  const viewName = item.view === null ? null : viewNames[item.view] ?? item.view
  return { viewName, title: wantInWords(item), spotsLeft: spotsLeft(item, evidence) }
}

function spotsLeft(item: WantItem, evidence: EvidenceSet): string[] {
  if (item.kind !== 'reading' || item.spot !== null || item.side === null) return []
  const card = evidence.casting
  const all = item.quantity === 'wall-thickness'
    ? wallSpots(card).filter(one => one.side === item.side).map(one => one.spot)
    : item.quantity === 'section-area' ? (item.side === 'intake' ? card.intake_port : card.exhaust_port).stations.map(station => `station ${station}`) : []
  const read = evidence.readings.filter(reading => reading.quantity === item.quantity && reading.op === evidence.op && reading.side === item.side
    && (item.cylinder === null || reading.cylinder === item.cylinder))
  return all.filter(spot => !read.some(reading => sameSpot(reading.spot, spot)))
}

