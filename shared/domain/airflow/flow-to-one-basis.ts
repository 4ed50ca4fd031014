import type { TraceStep } from '../uncertainty/evaluated'
import { assertPositive } from './assert-positive'
import { referenceBasis } from './reference-basis'

/** One reading as the bench gave it. */
export interface BenchReading {
  /** Actual volume flow, cfm. */
  flowCfm: number
  /** Flow with the valve shut at the same pressure, cfm; 0 when the sheet gives none. */
  leakCfm: number
  /** Test pressure of this reading. */
  pressurePa: number
  /** Of the air that was measured; the reference density where the bench has corrected for it already. */
  airDensity: number
  /** Plate today over plate nominal; 1 without a plate. */
  plateRatio: number
}

/**
 * One reading brought to the one basis: leak off at the same pressure, × √(28/p), × √(ρ/1.2041), ÷ plate ratio.
 *
 * Units: cfm, Pa, kg/m3; cfm at 28 inH2O and 1.2041 kg/m3.
 * Source: handbook 4.2. The square root ignores that air expands: from 10 to 28 inH2O it overstates by up to 2.5 % for an ideal
 * nozzle. The school accepts that (its usual curves are made alike).
 *
 * @throws {RangeError} on a pressure, density or plate ratio not above zero, or a flow or leak that is negative or not finite
 * @example
 * flowToOneBasis({ flowCfm: 22.8, leakCfm: 0.3, pressurePa: 6974.489, airDensity: 1.1949, plateRatio: 1.00133 }).cfm28 // => 22.38
 */
export function flowToOneBasis({ flowCfm, leakCfm, pressurePa, airDensity, plateRatio }: BenchReading): { cfm28: number, trace: TraceStep[] } {
  assertPositive('flowToOneBasis', { 'pressure': pressurePa, 'air density': airDensity, 'plate ratio': plateRatio })
  if (!Number.isFinite(flowCfm) || flowCfm < 0) throw new RangeError('flowToOneBasis requires a flow of at least zero')
  if (!Number.isFinite(leakCfm) || leakCfm < 0) throw new RangeError('flowToOneBasis requires a leak of at least zero')

  const net = flowCfm - leakCfm
  const atPressure = net * Math.sqrt(referenceBasis.pressurePa / pressurePa)
  const atDensity = atPressure * Math.sqrt(airDensity / referenceBasis.densityKgPerM3)
  const cfm28 = atDensity / plateRatio
  const inches = pressurePa / 249.08891
  return {
    cfm28,
    trace: [
      { what: 'leak taken off at the same pressure', sum: `${flowCfm.toFixed(2)} - ${leakCfm.toFixed(2)}`, gives: `${net.toFixed(2)} cfm` },
      { what: 'brought to 28 inH2O', sum: `${net.toFixed(2)} x sqrt(28 / ${inches.toFixed(2)})`, gives: `${atPressure.toFixed(2)} cfm` },
      { what: 'brought to air of 1.2041 kg/m3', sum: `${atPressure.toFixed(2)} x sqrt(${airDensity.toFixed(4)} / 1.2041)`, gives: `${atDensity.toFixed(2)} cfm` },
      { what: 'divided by the plate ratio', sum: `${atDensity.toFixed(2)} / ${plateRatio.toFixed(5)}`, gives: `${cfm28.toFixed(2)} cfm` },
    ],
  }
}
