import { hashBlob } from './hash-blob'
import type { OutboxItem } from './outbox-item'
import { putBlob } from './put-blob'

interface Piece { n?: number, url: string, headers: Record<string, string> }
interface Announced { id: string, state?: string, put?: Piece, parts?: (Piece & { n: number })[], partBytes?: number, have?: { n: number, etag: string }[] }

export type Post = <T>(path: string, body: unknown, key: string) => Promise<T>
export type Get = <T>(path: string) => Promise<T>

/**
 * Takes one item all the way to the server, from wherever an earlier try left off.
 * `keep` is called after every step that must survive a reload. Throws what the call threw.
 */
export async function sendItem(item: OutboxItem, post: Post, get: Get, keep: (item: OutboxItem) => Promise<void>): Promise<unknown> {
  if (item.kind === 'reading') return post(`/api/submissions/${item.submissionId}/readings`, item.input, item.id)
  await sendParcel(item, post, get, keep)
  const uploadId = item.parcel.uploadId
  const path = item.kind === 'photo' ? 'photos' : item.kind === 'flow-sheet' ? 'flow-sheets' : 'documents'
  return post(`/api/submissions/${item.submissionId}/${path}`, { ...item.input, uploadId }, item.id)
}

async function sendParcel(item: Exclude<OutboxItem, { kind: 'reading' }>, post: Post, get: Get, keep: (item: OutboxItem) => Promise<void>): Promise<void> {
  const { parcel } = item
  if (parcel.completed) return
  parcel.sha256 ??= await hashBlob(parcel.blob)
  let announced: Announced
  if (parcel.uploadId) {
    announced = await get<Announced>(`/api/uploads/${parcel.uploadId}`)
    parcel.sent = parcel.sent || announced.state === 'received'
  }
  else {
    announced = await post<Announced>('/api/uploads', { purpose: item.kind, filename: parcel.filename, bytes: parcel.blob.size, contentType: parcel.contentType, sha256: parcel.sha256 }, item.uploadKey)
    parcel.uploadId = announced.id
    await keep(item)
  }
  if (!parcel.sent) {
    if (announced.parts) await sendParts(item, announced, keep)
    else if (announced.put) await sendWhole(item, announced.put)
    parcel.sent = true
    await keep(item)
  }
  await post(`/api/uploads/${parcel.uploadId}/complete`, parcel.partsDone.length ? { parts: parcel.partsDone } : {}, crypto.randomUUID())
  parcel.completed = true
  await keep(item)
}

async function sendWhole(item: Exclude<OutboxItem, { kind: 'reading' }>, put: Piece): Promise<void> {
  const { status } = await putBlob(put.url, put.headers, item.parcel.blob, (share) => { item.progress = share })
  // 412: storage has it already, from a try whose answer was lost.
  if (status >= 300 && status !== 412) throw Object.assign(new Error('storage'), { status: status >= 500 ? 0 : status })
}

async function sendParts(item: Exclude<OutboxItem, { kind: 'reading' }>, announced: Announced, keep: (item: OutboxItem) => Promise<void>): Promise<void> {
  const { parcel } = item
  const parts = announced.parts ?? []
  const size = announced.partBytes ?? Math.ceil(parcel.blob.size / parts.length)
  for (const known of announced.have ?? []) if (!parcel.partsDone.some(done => done.n === known.n)) parcel.partsDone.push(known)
  for (const part of parts) {
    if (parcel.partsDone.some(done => done.n === part.n)) continue
    const from = (part.n - 1) * size
    const { status, etag } = await putBlob(part.url, part.headers, parcel.blob.slice(from, from + size), (share) => { item.progress = (parcel.partsDone.length + share) / parts.length })
    if (status >= 300 || !etag) throw Object.assign(new Error('storage'), { status: status >= 500 ? 0 : status })
    parcel.partsDone.push({ n: part.n, etag })
    await keep(item)
  }
  parcel.partsDone.sort((a, b) => a.n - b.n)
}
