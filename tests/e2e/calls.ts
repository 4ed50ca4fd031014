import { createHash, randomUUID } from 'node:crypto'
import type { Page } from '@playwright/test'
import { expect } from './walk'

/** What a route answered. */
export interface Answer<T> { status: number, body: T }

/** Asks a route as the page's signed-in person. @throws when it refuses */
export async function read<T>(page: Page, path: string): Promise<T> {
  const answer = await page.request.get(path)
  expect(answer.status(), `GET ${path}: ${await answer.text()}`).toBe(200)
  return await answer.json() as T
}

/** Calls a route as the page's signed-in person would by hand, past every button of the page. */
export async function send<T = Record<string, unknown>>(page: Page, path: string, body: unknown = {}): Promise<Answer<T>> {
  const answer = await page.request.post(path, { data: body, headers: { 'idempotency-key': randomUUID() } })
  return { status: answer.status(), body: await answer.json().catch(() => ({})) as T }
}

/** The same where the story needs it done. @throws when it is refused */
export async function must<T = Record<string, unknown>>(page: Page, path: string, body: unknown = {}): Promise<T> {
  const answer = await send<T>(page, path, body)
  expect(answer.status, `POST ${path}: ${JSON.stringify(answer.body)}`).toBeLessThan(300)
  return answer.body
}

/** Sends a file to storage as the outbox does, and gives its upload. */
export async function upload(page: Page, purpose: 'photo' | 'flow-sheet' | 'document', filename: string, contentType: string, body: Buffer): Promise<string> {
  const sha256 = createHash('sha256').update(body).digest('hex')
  const { id, put } = await must<{ id: string, put: { url: string, headers: Record<string, string> } }>(page, '/api/uploads', { purpose, filename, bytes: body.length, contentType, sha256 })
  const stored = await page.request.put(put.url, { headers: put.headers, data: body })
  expect(stored.status(), `storage takes ${filename}`).toBe(200)
  await must(page, `/api/uploads/${id}/complete`)
  return id
}
