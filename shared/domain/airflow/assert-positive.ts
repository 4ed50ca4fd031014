/**
 * Stops a sum that would end in NaN or a nonsense area before it starts.
 *
 * @throws {RangeError} naming the first value that is not finite and above zero
 */
export function assertPositive(caller: string, values: Record<string, number>): void {
  for (const [name, value] of Object.entries(values)) {
    if (!(value > 0) || !Number.isFinite(value)) throw new RangeError(`${caller} requires a ${name} above zero`)
  }
}
