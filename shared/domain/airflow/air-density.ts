/** State of the air at the bench. */
export interface AirState {
  temperatureC: number
  pressurePa: number
  /** 0 to 1. */
  relativeHumidity: number
}

/** Density with the figures on the way to it, for showing the working. */
export interface MoistAir {
  densityKgPerM3: number
  saturationPressurePa: number
  enhancementFactor: number
  /** Mole fraction of water vapour. */
  vapourFraction: number
  compressibility: number
}

/**
 * Density of moist air by the CIPM-2007 formula, with 400 parts per million of carbon dioxide.
 *
 * rho = p Ma / (Z R T) · (1 - xv (1 - Mv/Ma)), xv = h f(p,t) psv(T) / p. The gas constant is the formula's own, 8.314472, not
 * today's: the other constants were fitted with it. Stated range 600 to 1100 hPa and 15 to 27 °C; outside it the formula is still
 * smooth and within 1e-4 of its neighbours between 0 and 50 °C, which is more than a flow bench can see. It agrees with the
 * dry-gas-and-vapour sum many benches use to 0.03 %, that is 0.02 cfm in 150.
 *
 * Units: °C, Pa, share of 1; kg/m3.
 * Source: Picard, Davis, Gläser, Fujii, Metrologia 45 (2008) 149-155, equations (1) and (2), appendix A.
 *
 * @throws {RangeError} outside -20 to 60 °C, 500 to 1200 hPa, or 0 to 1 of humidity: no shop has such air, a unit is wrong
 * @example
 * airDensity({ temperatureC: 20, pressurePa: 101325, relativeHumidity: 0.5 }).densityKgPerM3 // => 1.19931
 */
export function airDensity({ temperatureC: t, pressurePa: p, relativeHumidity: h }: AirState): MoistAir {
  if (!(t >= -20 && t <= 60)) throw new RangeError('airDensity requires a temperature between -20 and 60 °C')
  if (!(p >= 50_000 && p <= 120_000)) throw new RangeError('airDensity requires a pressure between 500 and 1200 hPa')
  if (!(h >= 0 && h <= 1)) throw new RangeError('airDensity requires a humidity between 0 and 1')

  const kelvin = t + 273.15
  const saturationPressurePa = Math.exp(1.2378847e-5 * kelvin * kelvin - 1.9121316e-2 * kelvin + 33.93711047 - 6.3431645e3 / kelvin)
  const enhancementFactor = 1.00062 + 3.14e-8 * p + 5.6e-7 * t * t
  const xv = h * enhancementFactor * saturationPressurePa / p
  const ratio = p / kelvin
  const compressibility = 1
    - ratio * (1.58123e-6 - 2.9331e-8 * t + 1.1043e-10 * t * t + (5.707e-6 - 2.051e-8 * t) * xv + (1.9898e-4 - 2.376e-6 * t) * xv * xv)
    + ratio * ratio * (1.83e-11 - 0.765e-8 * xv * xv)
  const dryMolarMass = 28.96546e-3
  const vapourMolarMass = 18.01528e-3
  const densityKgPerM3 = p * dryMolarMass / (compressibility * 8.314472 * kelvin) * (1 - xv * (1 - vapourMolarMass / dryMolarMass))
  return { densityKgPerM3, saturationPressurePa, enhancementFactor, vapourFraction: xv, compressibility }
}
