import { theilSenLine } from '../uncertainty/theil-sen-line'
import { plateDifference } from './plate-difference'

/** One plate reading of a bench. */
export interface PlateReading {
  /** Days from any fixed day. */
  day: number
  reading: number
}

/** What a plate log says about its bench. */
export interface PlateDrift {
  perWeek: number
  /** Over the span of the log, per cent of the nominal. */
  overLogPercent: number
  days: number
  scatter: number
  /** Further than 3.5 scatters from the line. */
  outliers: { day: number, residual: number }[]
  /** Further than 1.5 % from the nominal: no sheet of that day counts. */
  outside: { day: number, percent: number }[]
  /** What the line expects on a day, for a sheet whose plate was not read. */
  at: (day: number) => number
}

/**
 * Drift of a bench from its plate log: Theil and Sen's line, the scatter from the median deviation.
 *
 * Units: days and the log's own flow unit.
 * Source: handbook 8.11; 3.5 scatters and 1.5 % are school design values.
 *
 * @throws {RangeError} with fewer than four readings, or a nominal not above zero
 */
export function plateDrift(log: readonly PlateReading[], nominal: number): PlateDrift {
  if (log.length < 4) throw new RangeError('plateDrift requires at least four readings')
  const days = log.map(entry => entry.day)
  const line = theilSenLine(days, log.map(entry => entry.reading))
  const span = Math.max(...days) - Math.min(...days)
  return {
    perWeek: 7 * line.slope,
    overLogPercent: 100 * line.slope * span / nominal,
    days: span,
    scatter: line.scatter,
    outliers: log.map((entry, i) => ({ day: entry.day, residual: line.residuals[i] as number })).filter(({ residual }) => Math.abs(residual) > 3.5 * line.scatter),
    outside: log.map(entry => ({ day: entry.day, percent: plateDifference(entry.reading, nominal) })).filter(({ percent }) => Math.abs(percent) > 1.5),
    at: day => line.intercept + line.slope * day,
  }
}
