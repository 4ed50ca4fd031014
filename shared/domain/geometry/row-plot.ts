import { leastSquaresLine } from '../uncertainty/least-squares-line'

/** The least wall of one cylinder. */
export interface RowPoint { cylinder: number, leastMm: number }

/** How the least wall runs along the cylinders. */
export interface RowPlot {
  /** mm a cylinder. */
  slopeMm: number
  /** k = 2. */
  expandedUncertainty: number
  /** Beyond its doubt: the cores moved when the head was cast. */
  coresMoved: boolean
  /** Wall the line expects at a cylinder. */
  at: (cylinder: number) => number
}

/**
 * Line through the least wall of each cylinder against its number.
 *
 * The doubt of the slope is the larger of what the points' own scatter gives and what the gauge gives (`expandedUncertainty` of one
 * reading); with three or four points the scatter alone can be small by chance.
 *
 * Units: mm.
 * Source: handbook 8.9.
 *
 * @throws {RangeError} with fewer than three cylinders, two readings of one, a wall that is not finite, or a U not above zero
 */
export function rowPlot(points: readonly RowPoint[], expandedUncertainty: number): RowPlot {
  if (!(expandedUncertainty > 0) || !Number.isFinite(expandedUncertainty)) throw new RangeError('rowPlot requires a doubt above zero')
  const cylinders = points.map(point => point.cylinder)
  if (new Set(cylinders).size !== cylinders.length) throw new RangeError('rowPlot requires one wall a cylinder')
  const line = leastSquaresLine(cylinders, points.map(point => point.leastMm))
  const mean = cylinders.reduce((sum, cylinder) => sum + cylinder, 0) / cylinders.length
  const spread = Math.sqrt(cylinders.reduce((sum, cylinder) => sum + (cylinder - mean) ** 2, 0))
  const doubt = Math.max(2 * line.slopeUncertainty, expandedUncertainty / spread)
  return { slopeMm: line.slope, expandedUncertainty: doubt, coresMoved: Math.abs(line.slope) > doubt, at: cylinder => line.intercept + line.slope * (cylinder - line.origin) }
}
