/** A line slower than this, in bytes a second, is taken for a dead one. */
const slowest = 32 * 1024

/** Sends bytes to storage and tells how far it is; `signal` breaks it off. fetch() cannot report progress of a body, so this is the older call. */
export function putBlob(url: string, headers: Record<string, string>, blob: Blob, onProgress: (share: number) => void, signal?: AbortSignal): Promise<{ status: number, etag: string | null }> {
  return new Promise((resolve, reject) => {
    const request = new XMLHttpRequest()
    request.open('PUT', url)
    // The browser sets these two itself and refuses to be told.
    for (const [name, value] of Object.entries(headers)) if (!['host', 'content-length'].includes(name.toLowerCase())) request.setRequestHeader(name, value)
    request.upload.onprogress = event => event.lengthComputable && onProgress(event.loaded / event.total)
    request.onload = () => resolve({ status: request.status, etag: request.getResponseHeader('etag') })
    request.onerror = () => reject(new TypeError('network'))
    request.onabort = () => reject(new TypeError('network'))
    request.timeout = Math.max(120_000, blob.size / slowest * 1000)
    request.ontimeout = () => reject(new TypeError('network'))
    signal?.addEventListener('abort', () => request.abort(), { once: true })
    request.send(blob)
  })
}
