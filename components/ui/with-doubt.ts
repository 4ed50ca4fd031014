import { roundToDoubt, type RoundedToDoubt } from '#shared/domain/units/round-to-doubt'

/** A number whose doubt is not known, with no more digits than it needs: at most three places, no trailing noughts from the conversion. */
export function withoutDoubt(value: number): { value: string, decimals: number } {
  const text = String(Number(value.toFixed(3)))
  return { value: text === '-0' ? '0' : text, decimals: text.split('.')[1]?.length ?? 0 }
}

/**
 * A value and its doubt as the school writes them: to the place of the doubt, without a nought that the doubt does not need.
 *
 * @throws {RangeError} as `roundToDoubt`
 * @example
 * writeWithDoubt(1.62, 0.08) // => { value: '1.62', doubt: '0.08', decimals: 2 }
 * writeWithDoubt(36.4967, 0.15) // => { value: '36.50', doubt: '0.15', decimals: 2 }
 */
export function writeWithDoubt(value: number, doubt: number): RoundedToDoubt {
  const rounded = roundToDoubt(value, doubt)
  if (!/\.\d*[1-9]\d*0$|^[1-9]\d*\.0$/.test(rounded.doubt)) return rounded
  const decimals = rounded.decimals - 1
  const shorter = value.toFixed(decimals)
  return { value: /^-[0.]+$/.test(shorter) ? shorter.slice(1) : shorter, doubt: rounded.doubt.slice(0, -1).replace(/\.$/, ''), decimals }
}
