import { refusals, type RefusalCode } from '#shared/contract/refusals'

/** An expected "no", with a sentence a person can act on. Anything else that is thrown is a fault. */
export class Refusal extends Error {
  readonly status: number
  constructor(
    readonly code: RefusalCode,
    /** More exact than the table's sentence, where the service knows more. */
    sentence?: string,
    /** Goes out beside the code: `issues`, `retryAfter`, `changed`, `refused`, ... */
    readonly extra: Record<string, unknown> = {},
  ) {
    super(sentence ?? refusals[code][1])
    this.status = refusals[code][0]
  }
}
