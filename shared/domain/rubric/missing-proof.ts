import type { Criterion } from './criterion'
import type { EvidenceSet, JudgedUnit } from './evidence'
import { wantItems, type WantItem } from './want-items'
import { wantInWords } from './want-in-words'

/**
 * What a criterion still wants for one unit, in words; empty when everything is in.
 *
 * The one rule of missing evidence: a value whose readings, photos or papers are not all there is *not assessed* and names what is
 * wanted; the Proof tray shows the same list. What is there is judged all the same, and a must rejected beyond a no-return end
 * stands as it is: metal that is gone does not come back with a photo. (The judge keeps that exception; this only lists.)
 *
 * Source: handbook 3.1, *not assessed* is evidence missing or not usable.
 */
export function missingProof(criterion: Criterion, evidence: EvidenceSet, unit: JudgedUnit): string[] {
  // Only the unit's own ports are asked about: a head has hundreds of readings, and each unit would count them all again.
  const ports = evidence.ports.filter(port => (unit.cylinder === null || port.cylinder === unit.cylinder) && (unit.side === null || port.side === unit.side))
  const missing = wantItems(criterion, { ...evidence, ports }).filter(item => item.have < item.count
    && (item.side === null || unit.side === null || item.side === unit.side))
  // Spots of one want are told in one breath.
  const groups = new Map<string, WantItem[]>()
  for (const item of missing) {
    const key = [item.kind, item.view, item.quantity, item.cylinder, item.side, item.when, item.kind === 'reading' ? '' : item.note].join('|')
    groups.set(key, [...groups.get(key) ?? [], item])
  }
  return [...groups.values()].map((items) => {
    const first = items[0] as WantItem
    const spots = items.map(item => item.spot).filter((spot): spot is string => spot !== null)
    const more = first.count - first.have
    return `${more > 1 ? `${more} x ` : ''}${wantInWords({ ...first, cylinder: unit.cylinder === first.cylinder ? null : first.cylinder, side: unit.side === first.side ? null : first.side }, spots)}`
  })
}
