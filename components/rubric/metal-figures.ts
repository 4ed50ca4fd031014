import { convert } from '#shared/domain/units/convert'

/** Thousandths of an inch that may be taken, rounded down: a figure that errs, errs on the side of more metal. */
export function takeInInches(takeMm: number): string {
  return (Math.floor(convert(takeMm, 'mm', 'in') * 1000 + 1e-9) / 1000).toFixed(3)
}

/** Where to stop, in inches, rounded up for the same reason. */
export function stopInInches(stopAtMm: number): string {
  return (Math.ceil(convert(stopAtMm, 'mm', 'in') * 1000 - 1e-9) / 1000).toFixed(3)
}

/**
 * A chance as people are told it: never 0 and never 1, since nothing measured is.
 *
 * @example
 * chanceInWords(0.00002) // => 'under 0.01 %'
 */
export function chanceInWords(chance: number): string {
  if (!(chance >= 0 && chance <= 1)) throw new RangeError('chanceInWords requires a chance between 0 and 1')
  const percent = chance * 100
  if (percent < 0.01) return 'under 0.01 %'
  if (percent > 99.9) return 'over 99.9 %'
  return `${percent < 1 ? percent.toFixed(2) : percent < 10 || percent > 90 ? percent.toFixed(1) : percent.toFixed(0)} %`
}
