import type { Evaluated } from '../uncertainty/evaluated'

/** A diameter with its standard uncertainty, mm. */
export interface DoubtedDiameter { mm: number, standardUncertainty: number }

/**
 * Throat as per cent of the valve head: 100 d/D, d being the mean of the directions read.
 *
 * u = 100 (d/D) √((u_d/d)² + (u_D/D)²). The directions are not repeats (a throat may be egg-shaped), and one gauge reads them all,
 * so its doubt does not shrink with their number.
 *
 * Units: mm; per cent.
 * Source: handbook 3.5.
 *
 * @throws {RangeError} with no direction, or a diameter not above zero, or a negative doubt
 * @example
 * throatShare([{ mm: 36.5, standardUncertainty: 0.03 }], { mm: 41, standardUncertainty: 0.01 }) // => 89.02 %, u 0.076
 */
export function throatShare(directions: readonly DoubtedDiameter[], valve: DoubtedDiameter): Evaluated {
  if (directions.length === 0) throw new RangeError('throatShare requires a throat reading')
  for (const { mm, standardUncertainty } of [...directions, valve]) {
    if (!(mm > 0) || !Number.isFinite(mm)) throw new RangeError('throatShare requires diameters above zero')
    if (!(standardUncertainty >= 0) || !Number.isFinite(standardUncertainty)) throw new RangeError('throatShare requires doubts of at least zero')
  }
  const mean = directions.reduce((sum, one) => sum + one.mm, 0) / directions.length
  const doubt = Math.max(...directions.map(one => one.standardUncertainty))
  const value = 100 * mean / valve.mm
  const standardUncertainty = value * Math.hypot(doubt / mean, valve.standardUncertainty / valve.mm)
  return {
    value,
    unit: '%',
    standardUncertainty,
    degreesOfFreedom: null,
    at: null,
    liftMm: null,
    trace: [
      { what: 'mean of the directions', sum: `(${directions.map(one => one.mm.toFixed(2)).join(' + ')}) / ${directions.length}`, gives: `${mean.toFixed(3)} mm` },
      { what: 'share of the valve head', sum: `100 x ${mean.toFixed(3)} / ${valve.mm.toFixed(2)}`, gives: `${value.toFixed(2)} %` },
      { what: 'doubt, k = 2', sum: `2 x ${value.toFixed(2)} x sqrt((${doubt.toFixed(3)} / ${mean.toFixed(2)})^2 + (${valve.standardUncertainty.toFixed(3)} / ${valve.mm.toFixed(2)})^2)`, gives: `${(2 * standardUncertainty).toFixed(2)} %` },
    ],
  }
}
