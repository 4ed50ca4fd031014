import type { Side } from '../units/port'
import type { CastingCard } from './casting'

/**
 * The casting card's own size for a length a person reads, mm; null where the card has none.
 *
 * A reading that does not name its side is held against the intake: the two are near enough for a slip of unit to show.
 */
export function nominalLength(card: Pick<CastingCard, 'valves' | 'intake_port' | 'exhaust_port'>, quantity: string, side: Side | null): number | null {
  const valve = card.valves[side ?? 'intake']
  const port = side === 'exhaust' ? card.exhaust_port : card.intake_port
  switch (quantity) {
    case 'throat-diameter': return valve.throat_received
    case 'valve-head-diameter': return valve.head
    case 'valve-stem-diameter': return valve.stem
    case 'port-width': return port.width_guide_received
    default: return null
  }
}
