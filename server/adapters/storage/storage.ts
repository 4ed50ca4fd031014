/** A request the browser may make to storage by itself, exactly as signed: another size, type or content is refused there. */
export interface SignedPut { url: string, headers: Record<string, string> }
export interface SignedPart extends SignedPut { n: number }

export interface StoredObject {
  bytes: number
  contentType: string
  etag: string
  /** Lower-case hex, as storage computed it itself; null where it did not (parts sent separately). */
  sha256: string | null
}

export interface NewObject {
  key: string
  bytes: number
  contentType: string
  /** Lower-case hex. */
  sha256: string
}

export interface Storage {
  /** A signed upload in one piece; a key is written once. */
  signPut: (object: NewObject) => Promise<SignedPut>
  /** Begins an upload in parts. @returns storage's id of it, to be kept */
  startParts: (object: NewObject) => Promise<string>
  /** Signed uploads of the parts, in order; sign again to go on after a break. */
  signParts: (upload: { key: string, multipartId: string, bytes: number }) => Promise<SignedPart[]>
  /** Numbers and tags of the parts that are there already. */
  partsThere: (upload: { key: string, multipartId: string }) => Promise<{ n: number, etag: string, bytes: number }[]>
  /** @throws {AdapterRefusal} upload_incomplete when a part is missing or another than was sent */
  completeParts: (upload: { key: string, multipartId: string, parts: readonly { n: number, etag: string }[] }) => Promise<void>
  /** Forgets an upload in parts; doing so twice is no fault. */
  abortParts: (upload: { key: string, multipartId: string }) => Promise<void>
  /** Null when there is no such object. */
  head: (key: string) => Promise<StoredObject | null>
  /** The whole object. @throws {AdapterRefusal} upload_incomplete when there is none */
  read: (key: string) => Promise<Uint8Array>
  /** Bytes `from` to `to`, both included, fewer at the end. @throws {AdapterRefusal} upload_incomplete when there is none */
  readRange: (key: string, from: number, to: number) => Promise<Uint8Array>
  /** SHA-256 of what is stored, read through without keeping it, in lower-case hex. */
  sha256Of: (key: string) => Promise<string>
  /** An address that shows or saves the object for 60 seconds, as the type given and no other. */
  signGet: (file: { key: string, contentType: string, filename: string, disposition: 'attachment' | 'inline' }) => Promise<string>
  /** Writes what the server made itself. */
  put: (object: { key: string, body: Uint8Array, contentType: string }) => Promise<void>
  /** Removing what is not there is no fault. */
  remove: (key: string) => Promise<void>
  list: (prefix: string, after?: string) => Promise<{ keys: string[], next: string | null }>
  /** Whether the bucket answers. */
  ready: () => Promise<boolean>
}

/** Above this a file goes up in parts. */
export const partsAboveBytes = 16 * 1024 ** 2
export const partBytes = 8 * 1024 ** 2
