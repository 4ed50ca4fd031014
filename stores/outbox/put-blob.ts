/** Sends bytes to storage and tells how far it is. fetch() cannot report progress of a body, so this is the older call. */
export function putBlob(url: string, headers: Record<string, string>, blob: Blob, onProgress: (share: number) => void): Promise<{ status: number, etag: string | null }> {
  return new Promise((resolve, reject) => {
    const request = new XMLHttpRequest()
    request.open('PUT', url)
    // The browser sets these two itself and refuses to be told.
    for (const [name, value] of Object.entries(headers)) if (!['host', 'content-length'].includes(name.toLowerCase())) request.setRequestHeader(name, value)
    request.upload.onprogress = event => event.lengthComputable && onProgress(event.loaded / event.total)
    request.onload = () => resolve({ status: request.status, etag: request.getResponseHeader('etag') })
    request.onerror = () => reject(new TypeError('network'))
    request.onabort = () => reject(new TypeError('network'))
    request.timeout = 120_000
    request.ontimeout = () => reject(new TypeError('network'))
    request.send(blob)
  })
}
