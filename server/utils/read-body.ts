import type { H3Event } from 'h3'
import { Refusal } from './refusal'

/** The raw body, read no further than `maxBytes`. @throws {Refusal} body_too_large */
export async function readBodyWithin(event: H3Event, maxBytes: number): Promise<Buffer> {
  const announced = Number(event.node.req.headers['content-length'] ?? 0)
  if (announced > maxBytes) throw new Refusal('body_too_large')
  const chunks: Buffer[] = []
  let size = 0
  for await (const chunk of event.node.req) {
    size += (chunk as Buffer).length
    if (size > maxBytes) throw new Refusal('body_too_large')
    chunks.push(chunk as Buffer)
  }
  return Buffer.concat(chunks)
}
