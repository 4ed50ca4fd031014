import { putBlob } from '~/stores/outbox/put-blob'

interface Piece { url: string, headers: Record<string, string> }
export interface Announced { id: string, state: 'open' | 'received' | 'used' | 'refused', put?: Piece, parts?: (Piece & { n: number })[], partBytes?: number, have?: { n: number, etag: string }[] }

export interface SendTools {
  /** Fresh signed addresses and what storage has. @throws what the call threw */
  look: () => Promise<Announced>
  onProgress: (share: number) => void
  wait: (milliseconds: number) => Promise<void>
  signal: AbortSignal
}

/** Tries of one part before a person is asked. */
const mostTries = 5

/**
 * Sends what storage does not have of a file, part after part; a part that does not arrive is tried again, each time after a longer
 * wait, with fresh addresses. Broken off by `signal`, it can be called again and goes on.
 *
 * @throws {DOMException} AbortError when stopped
 * @throws {TypeError} when a part did not arrive although it was tried again and again
 */
export async function sendFilm(file: Blob, announced: Announced, tools: SendTools): Promise<void> {
  let now = announced
  for (let tries = 0; ;) {
    const have = new Set((now.have ?? []).map(part => part.n))
    const size = now.partBytes ?? file.size
    const pieces = now.parts ?? (now.put ? [{ n: 1, ...now.put }] : [])
    const next = pieces.find(piece => !have.has(piece.n))
    const done = pieces.filter(piece => have.has(piece.n)).length
    if (!next) return
    tools.onProgress(done / pieces.length)
    try {
      const from = (next.n - 1) * size
      const { status, etag } = await putBlob(next.url, next.headers, file.slice(from, from + size), share => tools.onProgress((done + share) / pieces.length), tools.signal)
      // 412: storage has the whole of it already, from a try whose answer was lost.
      if (status >= 300 && !(status === 412 && now.put)) throw new TypeError(`storage said ${status}`)
      now = { ...now, have: [...now.have ?? [], { n: next.n, etag: etag ?? '' }] }
      tries = 0
    }
    catch (thrown) {
      if (tools.signal.aborted) throw new DOMException('stopped', 'AbortError')
      tries += 1
      if (tries >= mostTries) throw thrown
      await tools.wait(1000 * 2 ** (tries - 1))
      if (tools.signal.aborted) throw new DOMException('stopped', 'AbortError')
      now = await tools.look()
      if (now.state !== 'open') return
    }
  }
}
