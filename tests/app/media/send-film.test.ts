import { createHash } from 'node:crypto'
import { beforeEach, describe, expect, it, vi } from 'vitest'
import { hashFile } from '~/composables/film/hash-file'
import { sendFilm, type Announced, type SendTools } from '~/composables/film/send-film'
import { putBlob } from '~/stores/outbox/put-blob'

vi.mock('~/stores/outbox/put-blob', () => ({ putBlob: vi.fn() }))
const put = vi.mocked(putBlob)

const file = new Blob(['aaaa', 'bbbb', 'cc'])
const parts = (have: number[] = [], sign = ''): Announced => ({ id: 'u', state: 'open', partBytes: 4, parts: [1, 2, 3].map(n => ({ n, url: `/p${n}${sign}`, headers: {} })), have: have.map(n => ({ n, etag: `"${n}"` })) })
const tools = (change: Partial<SendTools> = {}): SendTools => ({ look: () => Promise.reject(new Error('not asked')), onProgress: () => undefined, wait: () => Promise.resolve(), signal: new AbortController().signal, ...change })

let sent: [string, string][]
beforeEach(() => {
  sent = []
  put.mockReset()
  put.mockImplementation(async (url, _headers, blob) => {
    sent.push([url, await blob.text()])
    return { status: 200, etag: '"x"' }
  })
})

describe('sending a film', () => {
  it('sends each part once, in order, its own bytes', async () => {
    await sendFilm(file, parts(), tools())
    expect(sent).toEqual([['/p1', 'aaaa'], ['/p2', 'bbbb'], ['/p3', 'cc']])
  })

  it('sends only what storage does not have', async () => {
    const shares: number[] = []
    await sendFilm(file, parts([1, 2]), tools({ onProgress: share => shares.push(share) }))
    expect(sent).toEqual([['/p3', 'cc']])
    expect(shares[0]).toBeCloseTo(2 / 3, 10)
  })

  it('tries a part again with fresh addresses, each time after a longer wait', async () => {
    put.mockRejectedValueOnce(new TypeError('network')).mockResolvedValueOnce({ status: 403, etag: null })
    const waits: number[] = []
    const look = vi.fn(() => Promise.resolve(parts([], '-again')))
    await sendFilm(file, parts(), tools({ look, wait: async milliseconds => void waits.push(milliseconds) }))
    expect(waits).toEqual([1000, 2000])
    expect(sent.map(([url]) => url)).toEqual(['/p1-again', '/p2-again', '/p3-again'])
  })

  it('asks a person after five tries, and says what happened', async () => {
    put.mockRejectedValue(new TypeError('network'))
    await expect(sendFilm(file, parts(), tools({ look: () => Promise.resolve(parts()) }))).rejects.toThrow('network')
    expect(put).toHaveBeenCalledTimes(5)
  })

  it('stops when told, and sends nothing after', async () => {
    const stop = new AbortController()
    put.mockImplementation(async () => {
      stop.abort()
      throw new TypeError('network')
    })
    await expect(sendFilm(file, parts(), tools({ signal: stop.signal }))).rejects.toMatchObject({ name: 'AbortError' })
    expect(put).toHaveBeenCalledTimes(1)
  })

  it('takes a small file that storage has already for sent', async () => {
    put.mockResolvedValue({ status: 412, etag: null })
    await sendFilm(file, { id: 'u', state: 'open', put: { url: '/whole', headers: {} } }, tools())
    expect(put).toHaveBeenCalledTimes(1)
  })
})

describe('hashing a file as it is read', () => {
  it('gives the SHA-256 of its bytes, whatever pieces they come in', async () => {
    const body = new Uint8Array(3_000_001).map((_, index) => index * 7)
    const shares: number[] = []
    // Node's own SHA-256 is the other program.
    expect(await hashFile(new Blob([body]), share => shares.push(share))).toBe(createHash('sha256').update(body).digest('hex'))
    expect(shares.at(-1)).toBe(1)
    // FIPS 180-4, the empty message; from memory.
    expect(await hashFile(new Blob([]), () => undefined)).toBe('e3b0c44298fc1c149afbf4c8996fb92427ae41e4649b934ca495991b7852b855')
  })

  it('stops when told', async () => {
    const stop = new AbortController()
    stop.abort()
    await expect(hashFile(new Blob(['a']), () => undefined, stop.signal)).rejects.toMatchObject({ name: 'AbortError' })
  })
})
