import { xml } from './xml'

/** An answer of S3's that is not a success, with the code the service's API reference gives it. */
export class S3Error extends Error {
  constructor(readonly status: number, readonly code: string, message: string, readonly headers: Record<string, string> = {}) {
    super(message)
  }

  toXml(resource: string, requestId: string): string {
    return xml('Error', { Code: this.code, Message: this.message, Resource: resource, RequestId: requestId })
  }
}
