import { createHash, randomUUID } from 'node:crypto'
import type { UploadInput } from '#shared/contract/inputs'
import type { Answer, Caller } from '../http'

export interface SentFile { id: string, put: { url: string, headers: Record<string, string> }, status: number }

/** What a phone announces for these bytes. */
export function announcement(body: Buffer, change: Partial<UploadInput> = {}): UploadInput {
  return { purpose: 'photo', filename: 'head.jpg', bytes: body.length, contentType: 'image/jpeg', sha256: createHash('sha256').update(body).digest('hex'), ...change }
}

/** Announces a file, sends it straight to storage as signed, and says complete; answers what complete said. */
export async function sendFile(caller: Caller, body: Buffer, change: Partial<UploadInput> = {}): Promise<{ id: string, complete: Answer }> {
  const announced = await caller.post<SentFile>('/api/uploads', announcement(body, change), randomUUID())
  if (announced.status !== 201) return { id: '', complete: announced as unknown as Answer }
  const { url, headers } = announced.body.put
  await fetch(url, { method: 'PUT', headers, body: new Uint8Array(body) })
  return { id: announced.body.id, complete: await caller.post(`/api/uploads/${announced.body.id}/complete`, {}) }
}
