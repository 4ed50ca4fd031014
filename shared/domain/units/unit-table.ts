/** What a unit measures. */
export type Dimension = 'length' | 'area' | 'volume' | 'volume-flow' | 'mass-flow' | 'pressure' | 'temperature' | 'density'

/** A unit as a whole-number ratio to SI, so that 1.614 in is 1.614 x 127 / 5 mm and no rounding of ours comes between. */
export interface UnitDefinition {
  dimension: Dimension
  /** SI value = value x numerator / denominator (+ offset). */
  numerator: number
  denominator: number
  /** Added after the ratio; only degrees Celsius and Fahrenheit have one. */
  offset: number
}

const unit = (dimension: Dimension, numerator: number, denominator = 1, offset = 0): UnitDefinition => ({ dimension, numerator, denominator, offset })

/**
 * Every unit by name, with its exact ratio to SI (m, m2, m3, m3/s, kg/s, Pa, K, kg/m3).
 *
 * Source: NIST SP 811 appendix B.8 (inch and foot exact by definition; inch of water *conventional*, water of 1000 kg/m3 under
 * 9.80665 m/s2, which is 249.08891 Pa: the one the school's benches use; pound-force from 0.45359237 kg).
 */
export const unitTable = {
  'm': unit('length', 1),
  'cm': unit('length', 1, 100),
  'mm': unit('length', 1, 1000),
  'um': unit('length', 1, 1_000_000),
  'in': unit('length', 127, 5000),
  'thou': unit('length', 127, 5_000_000),
  'm2': unit('area', 1),
  'cm2': unit('area', 1, 10_000),
  'mm2': unit('area', 1, 1_000_000),
  'in2': unit('area', 16_129, 25_000_000),
  'm3': unit('volume', 1),
  'l': unit('volume', 1, 1000),
  'cc': unit('volume', 1, 1_000_000),
  'ml': unit('volume', 1, 1_000_000),
  'mm3': unit('volume', 1, 1_000_000_000),
  'in3': unit('volume', 2_048_383, 125_000_000_000),
  'm3/s': unit('volume-flow', 1),
  'm3/min': unit('volume-flow', 1, 60),
  'm3/h': unit('volume-flow', 1, 3600),
  'l/s': unit('volume-flow', 1, 1000),
  'l/min': unit('volume-flow', 1, 60_000),
  'l/h': unit('volume-flow', 1, 3_600_000),
  'cfm': unit('volume-flow', 18_435_447, 39_062_500_000),
  'kg/s': unit('mass-flow', 1),
  'kg/h': unit('mass-flow', 1, 3600),
  'kg/min': unit('mass-flow', 1, 60),
  'g/s': unit('mass-flow', 1, 1000),
  'lb/min': unit('mass-flow', 45_359_237, 6_000_000_000),
  'Pa': unit('pressure', 1),
  'hPa': unit('pressure', 100),
  'mbar': unit('pressure', 100),
  'kPa': unit('pressure', 1000),
  'bar': unit('pressure', 100_000),
  'inH2O': unit('pressure', 24_908_891, 100_000),
  'mmH2O': unit('pressure', 980_665, 100_000),
  'cmH2O': unit('pressure', 980_665, 10_000),
  'mmHg': unit('pressure', 133_322_387_415, 1_000_000_000),
  'inHg': unit('pressure', 3_386_388_640_341, 1_000_000_000),
  'psi': unit('pressure', 8_896_443_230_521, 1_290_320_000),
  'K': unit('temperature', 1),
  'degC': unit('temperature', 1, 1, 273.15),
  'degF': unit('temperature', 5, 9, 459.67 * 5 / 9),
  'kg/m3': unit('density', 1),
  'g/cc': unit('density', 1000),
} as const satisfies Record<string, UnitDefinition>

export type UnitName = keyof typeof unitTable
