/**
 * SHA-256 of a file of any size as lower-case hex, read through a piece at a time and never held whole. Pure JavaScript, so that it
 * also works where the browser's own hashing does not (a plain http address on a local network).
 *
 * @throws {DOMException} AbortError when `signal` says so
 */
export async function hashFile(file: Blob, onProgress: (share: number) => void, signal?: AbortSignal): Promise<string> {
  const { sha256 } = await import('@noble/hashes/sha2.js')
  const hash = sha256.create()
  const reader = file.stream().getReader()
  let read = 0
  for (;;) {
    if (signal?.aborted) {
      await reader.cancel()
      throw new DOMException('stopped', 'AbortError')
    }
    const { done, value } = await reader.read()
    if (done) break
    hash.update(value)
    read += value.byteLength
    onProgress(file.size === 0 ? 1 : read / file.size)
  }
  return [...hash.digest()].map(byte => byte.toString(16).padStart(2, '0')).join('')
}
