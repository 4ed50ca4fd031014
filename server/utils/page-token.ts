import type { z, ZodTypeAny } from 'zod'
import { Refusal } from './refusal'

/** Where the next page of a list begins: the sort key of the last row, as opaque text. */
export function writePageToken(key: unknown): string {
  return Buffer.from(JSON.stringify(key)).toString('base64url')
}

/** @throws {Refusal} page_unknown when it is not one of ours */
export function readPageToken<Schema extends ZodTypeAny>(token: string, schema: Schema): z.output<Schema> {
  try {
    return schema.parse(JSON.parse(Buffer.from(token, 'base64url').toString('utf8')))
  }
  catch {
    throw new Refusal('page_unknown')
  }
}
