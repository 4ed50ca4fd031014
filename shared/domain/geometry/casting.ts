import type { Side } from '../units/port'

/** Walls of a casting card: lengths in mm. `points` are the spots a map is read at. */
export interface WallCard {
  nominal: number
  accept_min: number
  hard_min: number
  points?: (string | { name: string, clock?: string, below_seat?: number, station?: number })[]
  grid_stations?: number[]
  grid_heights?: number[]
  sides?: string[]
}

export interface ValveCard {
  head: number
  stem: number
  seat_deg: number
  seat_od: number
  throat_received: number
  throat_target: number
  cylinder_wall_clock: string
}

export interface PortCard {
  centreline_length: number
  stations: number[]
  station_names: string[]
  area_received: number[]
  area_target: number[]
  width_guide_received: number
  width_guide_target: number
}

/**
 * The nominal table of a casting as the school keeps it (`content/school/castings.json`). Lengths mm, areas mm2, volumes cc.
 * Only what the program computes with is typed; the rest of the card is kept as it is.
 */
export interface CastingCard {
  code: string
  name: string
  /** Scope letter of the rubric: D Dunnock, W Whimbrel. Derived from the name's first letter when seeded. */
  scope: string
  cylinders: number
  bore: number
  gasket_bore: number
  swept_cc_each: number
  gasket_thickness_crushed?: number
  deck_clearance?: number
  piston_dish_cc?: number
  piston_dome_cc?: number
  valves: Record<Side, ValveCard>
  intake_port: PortCard
  exhaust_port: PortCard
  walls: Record<string, WallCard>
  lift_curve: { max_lift: number, duration_crank_deg: number, shape: string }
  test_lifts_in?: number[]
  test_lifts_mm?: number[]
  usual_flow: {
    lift_mm: number[]
    intake: Record<'base' | 'bowl' | 'port' | 'short', number[]>
    exhaust: Record<'base' | 'bowl' | 'port' | 'short', number[]>
    band_pct: number
  }
}
