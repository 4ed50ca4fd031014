import type { Side } from '../units/port'

/** One point brought to the one basis: 28 inH2O, air of 1.2041 kg/m3, plate-corrected, leak taken off. */
export interface FlowPoint {
  liftMm: number
  cfm28: number
  /** k = 2, cfm: of this reading in a change on one bench (0.7 % and 0.25 cfm in quadrature). */
  expandedUncertainty: number
  /** Pressure of the row as read, Pa; null when only the sheet's own pressure is known. */
  pressurePa: number | null
  /** Share of the bench's range used by this reading, 0 to 1; absent or null where the sheet has no such column. */
  rangeShare?: number | null
}

/** One flow run of one port as the program read it. Points rise with lift; a missing point is in `missing`, never a zero. */
export interface FlowRun {
  cylinder: number | null
  side: Side | null
  points: FlowPoint[]
  missing: { liftMm: number, reason: string }[]
  /** The single runs, each at the one basis, where `points` is the mean of several of one port; left out when there was one. */
  repeats?: FlowPoint[][]
}

/** What the sheet says of its set-up. Null where the sheet is silent. SI and mm whatever the sheet was written in. */
export interface SheetHeader {
  bench: string | null
  /** ISO date; null when absent or ambiguous (then a question stands in `needs`). */
  date: string | null
  operator: string | null
  head: string | null
  stage: 'base' | 'bowl' | 'port' | 'short' | 'final' | null
  valveMm: number | null
  stemMm: number | null
  seatDeg: number | null
  throatMm: number | null
  landMm: number | null
  entry: string | null
  pipe: string | null
  pressurePa: number | null
  temperatureC: number | null
  barometerHpa: number | null
  /** Per cent. */
  humidity: number | null
  airDensity: number
  /** cfm at the one basis, valve shut; null when never read. */
  leakCfm28: number | null
  /** Plate today over plate nominal; 1 when the sheet has no plate. */
  plateRatio: number
  plateGiven: boolean
}
