import { findUnit } from './find-unit'

/** What some conversions need besides the value. */
export interface ConvertOptions {
  /** Needed only between a volume flow and a mass flow. */
  densityKgPerM3?: number
}

/**
 * A value in another unit of the same dimension.
 *
 * The ratio of the two units is kept in whole numbers and applied once, so inches to millimetres is exactly x 127 / 5.
 * Volume flow to mass flow and back needs the density of the air that was measured.
 *
 * Source: the ratios are those of `unit-table.ts`.
 *
 * @throws {RangeError} on an unknown unit, incompatible units, a value that is not finite, or a missing or impossible density
 * @example
 * convert(1.614, 'in', 'mm') // => 40.9956
 */
export function convert(value: number, from: string, to: string, options: ConvertOptions = {}): number {
  if (!Number.isFinite(value)) throw new RangeError('convert requires a finite value')
  const source = findUnit(from)
  const target = findUnit(to)

  if (source.dimension === target.dimension) {
    if (from === to) return value
    if (source.offset !== 0 || target.offset !== 0) {
      const si = value * source.numerator / source.denominator + source.offset
      return (si - target.offset) * target.denominator / target.numerator
    }
    return scale(value, [source.numerator, target.denominator], [source.denominator, target.numerator])
  }

  const toMass = source.dimension === 'volume-flow' && target.dimension === 'mass-flow'
  const toVolume = source.dimension === 'mass-flow' && target.dimension === 'volume-flow'
  if (toMass || toVolume) {
    const density = options.densityKgPerM3
    if (density === undefined || !(density > 0) || !Number.isFinite(density)) throw new RangeError(`${from} to ${to} needs the density of the air`)
    const factor = toMass ? density : 1 / density
    return scale(value, [source.numerator, target.denominator], [source.denominator, target.numerator]) * factor
  }
  throw new RangeError(`${from} is ${source.dimension} and ${to} is ${target.dimension}`)
}

/** Multiplies by a ratio reduced to its lowest terms first, so that one multiplication and one division are all the rounding there is. */
function scale(value: number, above: [number, number], below: [number, number]): number {
  const [a, b] = above
  const [c, d] = below
  const first = commonDivisor(a, c)
  const second = commonDivisor(b, d)
  const third = commonDivisor(a / first, d / second)
  const fourth = commonDivisor(b / second, c / first)
  const numerator = (a / first / third) * (b / second / fourth)
  const denominator = (c / first / fourth) * (d / second / third)
  return value * numerator / denominator
}

function commonDivisor(a: number, b: number): number {
  let [x, y] = [a, b]
  while (y !== 0) [x, y] = [y, x % y]
  return x
}
