import { chanceUnder } from './chance-under'

/** What may still be taken at a spot, as it is shown: never without where to stop. */
export interface MetalLeft {
  /** Rounded down to 0.1 mm; null means "stop; show the map". */
  takeMm: number | null
  stopAtMm: number
  /** Chance of ending under the hard least after taking all of it. */
  chanceUnderHardLeast: number
}

/** A reading and what it is held against. All mm, U at k = 2. */
export interface MetalReading {
  readingMm: number
  expandedUncertainty: number
  acceptLeastMm: number
  hardLeastMm: number
  /** The student's own; 0.15 until known. */
  handAllowanceMm: number
}

/** Over this chance no figure is shown. Source: handbook 3.1. */
const greatestChance = 0.02

/**
 * Metal left = reading - U - accept least - hand allowance, rounded down to 0.1 mm, never under 0, always with where to stop.
 *
 * The chance is of ending under the *hard* least after taking all of it; over 2 % no figure is given.
 *
 * Source: handbook 3.1 and 8.9.
 *
 * @throws {RangeError} on a value that is not finite, a U not above zero, or a hard least above the accept least
 * @example
 * metalLeft({ readingMm: 4.4, expandedUncertainty: 0.15, acceptLeastMm: 3.5, hardLeastMm: 3, handAllowanceMm: 0.15 })
 * // => { takeMm: 0.6, stopAtMm: 3.5, chanceUnderHardLeast: 0.000001 }
 */
export function metalLeft({ readingMm, expandedUncertainty, acceptLeastMm, hardLeastMm, handAllowanceMm }: MetalReading): MetalLeft {
  if (![readingMm, expandedUncertainty, acceptLeastMm, hardLeastMm, handAllowanceMm].every(Number.isFinite)) throw new RangeError('metalLeft requires finite lengths')
  if (!(expandedUncertainty > 0) || handAllowanceMm < 0) throw new RangeError('metalLeft requires a doubt above zero and a hand allowance of at least zero')
  if (hardLeastMm > acceptLeastMm) throw new RangeError('metalLeft requires a hard least that is not above the accept least')
  const left = readingMm - expandedUncertainty - acceptLeastMm - handAllowanceMm
  // 4.40 - 0.15 - 3.5 - 0.15 is 0.6000000000000003 one way and 0.5999999999999998 another; both are 0.6.
  const cutMm = Math.max(0, Math.floor((left + 1e-9) * 10) / 10)
  const chanceUnderHardLeast = chanceUnder({ wallMm: readingMm, standardUncertainty: expandedUncertainty / 2, cutMm, handMm: handAllowanceMm, hardLeastMm })
  return { takeMm: chanceUnderHardLeast > greatestChance ? null : cutMm, stopAtMm: acceptLeastMm, chanceUnderHardLeast }
}
