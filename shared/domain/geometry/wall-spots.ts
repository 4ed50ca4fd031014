import type { Side } from '../units/port'
import type { CastingCard } from './casting'

/** One spot of the wall map a casting card asks for. */
export interface WallSpot {
  /** Key of the wall on the card ("pushrod", "intake_roof"). */
  wall: string
  side: Side
  /** In the words of the rubric's wants: "pushrod fore, station 20, height -8", "bowl, fore", "roof, station 40". */
  spot: string
}

/**
 * Every spot of the wall map of one cylinder, in the order of the card.
 *
 * A wall belongs to the side its key names; the pushrod and cam-chest walls stand beside the intake, a wall that names neither
 * (a bowl, a fin root) is read at both ports. A grid is its faces x stations x heights. A wall without points on the card has none here.
 *
 * Source: casting card, `walls`; spot names as in the rubric's wants.
 */
export function wallSpots(card: Pick<CastingCard, 'walls'>): WallSpot[] {
  return Object.entries(card.walls).flatMap(([wall, given]) => {
    const sides: Side[] = wall.includes('exhaust') ? ['exhaust'] : /intake|pushrod|cam_chest/.test(wall) ? ['intake'] : ['intake', 'exhaust']
    const named = (given.points ?? []).map(point => typeof point === 'string'
      ? point
      // Points told apart by their station alone share a name on the card.
      : (given.points ?? []).filter(other => typeof other !== 'string' && other.name === point.name).length > 1 ? `${point.name}, station ${point.station}` : point.name)
    const grid = (given.sides ?? []).flatMap(face => (given.grid_stations ?? []).flatMap(station =>
      (given.grid_heights ?? []).map(height => `${face}, station ${station}, height ${height > 0 ? '+' : ''}${height}`)))
    return sides.flatMap(side => [...named, ...grid].map(spot => ({ wall, side, spot })))
  })
}
