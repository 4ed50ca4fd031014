import { convert } from './convert'

/**
 * A length in both units, millimetres first: inch people and metric people work at the same bench.
 *
 * Units: mm in.
 *
 * @throws {RangeError} when the length is not finite
 * @example
 * formatLength(1.62) // => '1.62 mm (0.064 in)'
 */
export function formatLength(lengthMm: number, decimalsMm = 2): string {
  // One place more in inches loses nothing: 0.001 in is 0.025 mm.
  return `${lengthMm.toFixed(decimalsMm)} mm (${convert(lengthMm, 'mm', 'in').toFixed(decimalsMm + 1)} in)`
}
