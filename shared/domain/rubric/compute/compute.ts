import { airQuantities } from './air-quantities'
import { checkInputs } from './check-inputs'
import type { Computable, Computed } from './computable'
import { metalQuantities } from './metal-quantities'

/** Every quantity that can be computed by hand, by name. */
export const computables: readonly Computable[] = [...metalQuantities, ...airQuantities]

/** The quantity of that name; null when there is none. */
export function computableNamed(name: string): Computable | null {
  return computables.find(one => one.name === name) ?? null
}

/**
 * Computes one quantity from inputs somebody gave.
 *
 * @throws {InputsRefused} on inputs out of kind or bounds; {RangeError} on inputs that contradict each other
 */
export function compute(quantity: Computable, given: unknown): Computed {
  const computed = quantity.compute(checkInputs(quantity.inputs, given))
  const values = Array.isArray(computed.value) ? computed.value : [computed.value]
  // The last gate: a figure that is none must not leave, however it came about.
  if (!values.every(Number.isFinite)) throw new RangeError('the inputs lead to no finite value')
  return computed
}
