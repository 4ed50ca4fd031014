/** A value and its doubt as they are shown together, both to the same place. */
export interface RoundedToDoubt {
  value: string
  doubt: string
  /** Digits after the point; 0 also where the place is tens or above. */
  decimals: number
}

/**
 * A value rounded to the place its doubt has, the doubt rounded to two significant digits.
 *
 * Source: JCGM 100:2008, 7.2.6 (from memory).
 *
 * @throws {RangeError} when either is not finite or the doubt is not above zero
 * @example
 * roundToDoubt(125.846, 0.9161) // => { value: '125.85', doubt: '0.92', decimals: 2 }
 */
export function roundToDoubt(value: number, doubt: number): RoundedToDoubt {
  if (!Number.isFinite(value)) throw new RangeError('roundToDoubt requires a finite value')
  if (!(doubt > 0) || !Number.isFinite(doubt)) throw new RangeError('roundToDoubt requires a doubt above zero')
  // Rounding first: 0.0996 becomes 0.10, whose last digit is a place higher than that of 0.0996.
  const twoDigits = doubt.toExponential(1)
  const exponent = Number(twoDigits.slice(twoDigits.indexOf('e') + 1))
  const decimals = 1 - exponent
  if (decimals >= 0 && decimals <= 100) return { value: withoutMinusZero(value.toFixed(decimals)), doubt: Number(twoDigits).toFixed(decimals), decimals }
  if (decimals > 100) throw new RangeError('roundToDoubt requires a doubt of a size that can be written down')
  const step = 10 ** -decimals
  return { value: withoutMinusZero((Math.round(value / step) * step).toFixed(0)), doubt: Number(twoDigits).toFixed(0), decimals: 0 }
}

function withoutMinusZero(text: string): string {
  return /^-[0.]+$/.test(text) ? text.slice(1) : text
}
