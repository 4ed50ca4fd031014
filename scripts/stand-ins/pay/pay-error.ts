/** A refusal in the shape the processor's API has: `{ error: { type, code, message, param } }`. */
export class PayError extends Error {
  constructor(
    readonly status: number,
    readonly type: 'invalid_request_error' | 'idempotency_error' | 'api_error',
    message: string,
    readonly more: { code?: string, param?: string } = {},
  ) {
    super(message)
  }

  toBody() {
    return { error: { type: this.type, message: this.message, ...this.more } }
  }
}
