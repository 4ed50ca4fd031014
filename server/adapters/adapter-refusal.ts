import type { RefusalCode } from '../../shared/contract/refusals'

/**
 * What an adapter says when the outside world's answer, or the file, cannot be used and a person can do something about it.
 * Anything else it throws is a fault.
 */
export class AdapterRefusal extends Error {
  override name = 'AdapterRefusal'

  constructor(readonly code: RefusalCode, readonly sentence: string) {
    super(sentence)
  }
}
