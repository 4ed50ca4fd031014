/**
 * The middle value, or the mean of the two middle ones.
 *
 * @throws {RangeError} with no values or one that is not finite
 */
export function median(values: readonly number[]): number {
  if (values.length === 0) throw new RangeError('median requires at least one value')
  if (!values.every(Number.isFinite)) throw new RangeError('median requires finite values')
  const sorted = [...values].sort((a, b) => a - b)
  const half = Math.floor(sorted.length / 2)
  const upper = sorted[half] as number
  return sorted.length % 2 === 1 ? upper : ((sorted[half - 1] as number) + upper) / 2
}
