import type { CastingCard, PortCard, ValveCard } from '#shared/domain/geometry/casting'
import { sameSpot } from '#shared/domain/rubric/same-spot'
import { wallOfSpot } from '#shared/domain/rubric/wall-of-spot'
import { wallSpots } from '#shared/domain/geometry/wall-spots'
import type { Side } from '#shared/domain/units/port'
import { steadyNoise } from './steady-noise'

/** What of a casting card only the story reads. */
export type StoryCard = CastingCard & {
  chamber: { as_received_cc: number, target_cc: number }
  valves: Record<Side, ValveCard & { land_received: [number, number], margin: number }>
  intake_port: PortCard & { volume_target_cc: number }
}

/** One spot somebody reads; with an instrument where the want names it. */
export interface SpotToRead { quantity: string, op: number, cylinder: number | null, side: Side | null, spot: string | null, when: 'before' | 'after' | null, count: number, instrument?: string }

/** What the story says of some spots of a head instead: the newest rule that fits wins. What is left out fits anything. */
export interface IronRule { quantity: string, ops?: readonly number[], cylinder?: number, side?: Side, spot?: string, value: number }

/** Op from which on the bowls are open, and the ports, and the roof. */
const bowls = 70
const ports = 110

/**
 * What a careful student of the demo school reads at a spot: the casting card's own figure for that stage of the work with a little
 * scatter, in the quantity's base unit, as typed. Null where the story has no figure (nobody read it).
 *
 * These are generated and every submission that holds them says so. They are plausible for the casting, and no more.
 */
export function readIron(card: StoryCard, head: string, at: SpotToRead, rules: readonly IronRule[]): { values: string[], instrument: string } | null {
  const instrument = instrumentFor(at)
  if (instrument === null) return null
  const ruled = [...rules].reverse().find(rule => rule.quantity === at.quantity && (rule.ops === undefined || rule.ops.includes(at.op))
    && (rule.cylinder === undefined || rule.cylinder === at.cylinder) && (rule.side === undefined || rule.side === at.side)
    && (rule.spot === undefined || sameSpot(rule.spot, at.spot)))
  const noise = (index: number) => steadyNoise(head, at.quantity, at.op, at.cylinder, at.side, at.spot, at.when, index)
  const repeats = at.quantity === 'chamber-volume' ? 3 : 1
  const values = Array.from({ length: repeats }, (_, index) => {
    const figure = ruled ? { value: ruled.value, scatter: 0, digits: 2 } : usual(card, head, at)
    return figure === null ? null : figure.digits === 'yes/no' ? (figure.value === 1 ? 'yes' : 'no') : (figure.value + figure.scatter * noise(index)).toFixed(figure.digits)
  })
  return values.includes(null) ? null : { values: values as string[], instrument }
}

interface Figure { value: number, scatter: number, digits: number | 'yes/no' }
const about = (value: number, scatter: number, digits = 2): Figure => ({ value, scatter, digits })

function usual(card: StoryCard, head: string, at: SpotToRead): Figure | null {
  const side = at.side ?? 'intake'
  const valve = card.valves[side]
  const later = at.when !== 'before'
  switch (at.quantity) {
    case 'deck-flatness': return about(0.03, 0.02)
    case 'guide-rock': return about(0.08, 0.03)
    case 'seat-land': return at.op < bowls ? about((valve.land_received[0] + valve.land_received[1]) / 2, 0.1) : about(1.67, 0.04)
    case 'valve-head-diameter': return about(valve.head, 0.02)
    case 'valve-stem-diameter': return about(valve.stem - 0.03, 0.01)
    case 'valve-margin': return about(valve.margin, 0.05)
    case 'valve-runout': return about(0.02, 0.01)
    case 'crack-indications':
    case 'land-nicks': return about(0, 0, 0)
    case 'rig-pressure': return about(/10 min/.test(at.spot ?? '') ? 170.6 : 172, 0.2, 1)
    case 'throat-diameter': return about(at.op < bowls ? valve.throat_received : valve.throat_target, 0.03)
    case 'gauge-zero': return about(10, 0.02)
    case 'wall-thickness': return wall(card, head, at)
    case 'section-area': return section(card, at)
    case 'chamber-volume': return about((at.op < 60 ? card.chamber.as_received_cc : card.chamber.target_cc) + 0.2 * steadyNoise(head, 'chamber', at.cylinder), 0.06)
    case 'port-volume': return about(card.intake_port.volume_target_cc, 0.4, 1)
    case 'fluid-temperature': return about(19.5, 0.5, 1)
    case 'plate-flow': return about(150, 0.2, 1)
    case 'dummy-height': return about(-0.1, 0.05)
    case 'land-showing': return about(0.02, 0.02)
    case 'line-width': return about(0.12, 0.03)
    case 'bore-line-offset': return about(0, 0.08)
    case 'shroud-arc-error': return about(0, 0.1)
    case 'no-grind-hatching':
    case 'grit': return { value: 1, scatter: 0, digits: 'yes/no' }
    case 'bore-line-margin': return about(0.45, 0.06)
    case 'shroud-gap': return about(side === 'intake' ? 2.7 : 2.95, 0.06)
    case 'floor-hump': return about(-0.12, 0.05)
    case 'plug-edge-radius': return about(0.75, 0.08)
    case 'no-grind-area-cut': return about(0, 0, 0)
    case 'under-seat-radius': return about(side === 'intake' ? 7 : 6, 0.4, 1)
    case 'mean-radial-cut': return about(side === 'intake' ? 1.45 : 0.85, 0.04)
    case 'guide-boss-width': return about(14.6, 0.1)
    case 'guide-length': return about(later ? 49.6 : 50, 0.05)
    case 'port-width': return width(card, at)
    case 'guide-offset': return about(!later ? 19.7 : at.spot === 'other side' ? 16.5 : 25.8, 0.2, 1)
    case 'floor-drop': return about(side === 'intake' ? 0.2 : 0.1, 0.05)
    case 'entry-step': return about(-0.2, 0.05)
    case 'exit-step': return about(-0.5, 0.1)
    case 'roof-hump': return about(0.1, 0.1)
    case 'apex-height': return about(40, 0.03)
    default: return null
  }
}

/** How far below the card's nominal a wall is by then, mm: bowls and ports are cut, the roof loses its hump. */
function cutFrom(at: SpotToRead): number {
  const where = wallOfSpot(at.spot ?? '')
  if (/bowl/.test(where)) return at.op < bowls ? 0 : at.side === 'intake' ? 1.1 : 0.6
  if (/pushrod/.test(where)) return at.op < ports ? 0 : 0.9
  if (/roof over hump/.test(where)) return at.op < 120 || at.when === 'before' ? 0 : 3.4
  return 0
}

function wall(card: StoryCard, head: string, at: SpotToRead): Figure | null {
  const spot = wallSpots(card).find(one => one.side === at.side && sameSpot(one.spot, at.spot))
  const nominal = spot ? card.walls[spot.wall]?.nominal : undefined
  if (nominal === undefined) return null
  // Iron as it was poured: the same at every reading of the spot.
  const poured = nominal + 0.25 * steadyNoise(head, 'wall', at.cylinder, at.side, at.spot)
  return about(poured - cutFrom(at), 0.03, 1)
}

function section(card: StoryCard, at: SpotToRead): Figure | null {
  const port = at.side === 'exhaust' ? card.exhaust_port : card.intake_port
  const index = port.stations.indexOf(Number(/\d+/.exec(at.spot ?? '')?.[0] ?? Number.NaN))
  const area = (at.op < ports ? port.area_received : port.area_target)[index]
  return area === undefined ? null : about(area, area * 0.003, 0)
}

function width(card: StoryCard, at: SpotToRead): Figure {
  if (/apex/.test(at.spot ?? '')) return about(35.5, 0.3, 1)
  const port = at.side === 'exhaust' ? card.exhaust_port : card.intake_port
  return about(at.when === 'before' ? port.width_guide_received : port.width_guide_target, 0.06)
}

/** The gauge the school reads a quantity with. */
function instrumentFor(at: SpotToRead): string | null {
  const one: Readonly<Record<string, string>> = {
    'deck-flatness': 'straightedge-feeler', 'guide-rock': 'dial-indicator', 'seat-land': 'loupe', 'valve-head-diameter': 'outside-micrometer', 'valve-stem-diameter': 'outside-micrometer',
    'valve-margin': 'caliper', 'valve-runout': 'dial-indicator', 'crack-indications': 'count', 'land-nicks': 'count', 'rig-pressure': 'pressure-gauge', 'throat-diameter': 'split-ball',
    'gauge-zero': 'wall-gauge', 'wall-thickness': 'wall-gauge', 'section-area': 'mould', 'chamber-volume': 'burette', 'port-volume': 'burette', 'fluid-temperature': 'thermometer',
    'plate-flow': 'flow-bench-plate', 'dummy-height': 'depth-micrometer', 'land-showing': 'loupe', 'line-width': 'loupe-line', 'bore-line-offset': 'photo-typed', 'shroud-arc-error': 'photo-typed',
    'no-grind-hatching': 'eye', 'grit': 'eye', 'bore-line-margin': 'photo-typed', 'shroud-gap': 'photo-typed', 'floor-hump': 'straightedge-feeler-floor', 'plug-edge-radius': 'photo-typed',
    'no-grind-area-cut': 'photo-area', 'under-seat-radius': 'mould-radius', 'mean-radial-cut': 'caliper', 'guide-boss-width': 'caliper', 'guide-length': 'depth-micrometer', 'port-width': 'inside-caliper',
    'guide-offset': 'inside-caliper', 'floor-drop': 'mould-overlay', 'entry-step': 'photo-typed', 'exit-step': 'photo-typed', 'roof-hump': 'mould-overlay', 'apex-height': 'depth-micrometer',
  }
  return one[at.quantity] ?? null
}
