import { Refusal } from '#server/utils/refusal'
import { InputsRefused } from '#shared/domain/rubric/compute/check-inputs'
import { compute, computableNamed } from '#shared/domain/rubric/compute/compute'
import type { Computed } from '#shared/domain/rubric/compute/computable'

/**
 * One quantity of the domain from inputs somebody gave, to be checked by hand.
 *
 * @throws {Refusal} compute_unknown; input_invalid naming each input that is wrong; compute_refused where the inputs contradict each other
 */
export function computeByHand(name: string, inputs: Record<string, unknown>): Computed {
  const quantity = computableNamed(name)
  if (!quantity) throw new Refusal('compute_unknown')
  try {
    return compute(quantity, inputs)
  }
  catch (thrown) {
    if (thrown instanceof InputsRefused) throw new Refusal('input_invalid', undefined, { issues: thrown.issues })
    if (thrown instanceof RangeError) throw new Refusal('compute_refused', `That cannot be computed: ${thrown.message}.`)
    throw thrown
  }
}
