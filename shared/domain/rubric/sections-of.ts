import type { PortCard } from '../geometry/casting'
import type { Section } from '../geometry/assert-sections'
import type { EvidenceSet, JudgedUnit } from './evidence'
import { readingsOf } from './readings-of'
import { readingValue } from './reading-value'

/** The card of the port a unit is of. */
export function portCard(evidence: EvidenceSet, unit: JudgedUnit): PortCard {
  return unit.side === 'exhaust' ? evidence.casting.exhaust_port : evidence.casting.intake_port
}

/** The section schedule as read now, along the port. A spot is "station 30" or the card's name of the station. */
export function sectionsOf(evidence: EvidenceSet, unit: JudgedUnit, op?: number): Section[] {
  const card = portCard(evidence, unit)
  return readingsOf(evidence, { quantity: 'section-area', unit, ...(op === undefined ? {} : { op }) }).flatMap((reading): Section[] => {
    const stationMm = stationOf(reading.spot, card)
    const areaMm2 = readingValue(reading, 'mm2').value
    return stationMm === null || !(areaMm2 > 0) ? [] : [{ stationMm, areaMm2 }]
  }).sort((a, b) => a.stationMm - b.stationMm)
    .filter((section, index, all) => section.stationMm !== all[index - 1]?.stationMm)
}

/**
 * Sections without the bowl, which widens and narrows by design: the throat and the guide station of the card, and anything
 * between them and beyond.
 *
 * Source: handbook 3.5 and 8.3 ("bowl left out").
 */
export function withoutBowl(evidence: EvidenceSet, unit: JudgedUnit, sections: readonly Section[]): Section[] {
  const card = portCard(evidence, unit)
  const guide = card.stations[card.station_names.indexOf('guide')]
  if (guide === undefined) return [...sections]
  const throatFirst = card.station_names[0] === 'throat'
  return sections.filter(section => throatFirst ? section.stationMm > guide + 0.5 : section.stationMm < guide - 0.5)
}

function stationOf(spot: string | null, card: PortCard): number | null {
  if (spot === null) return null
  const tidy = spot.trim().toLowerCase()
  const named = card.station_names.findIndex(name => name.toLowerCase() === tidy)
  if (named >= 0) return card.stations[named] ?? null
  const number = /^(?:station )?(\d+(?:\.\d+)?)(?: mm)?$/.exec(tidy)?.[1]
  return number === undefined ? null : Number(number)
}
