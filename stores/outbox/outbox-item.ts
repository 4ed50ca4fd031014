import type { PhotoInput, ReadingInput, SheetInput } from '#shared/contract/inputs'

/** A file on its way up: what of it the server already knows. */
interface Parcel {
  blob: Blob
  filename: string
  contentType: string
  sha256: string | null
  uploadId: string | null
  /** Part numbers storage has, with their tags; only for files sent in parts. */
  partsDone: { n: number, etag: string }[]
  /** Storage has every byte. */
  sent: boolean
  completed: boolean
}

interface Common {
  /** Made here; also the Idempotency-Key of the call that files it. */
  id: string
  /** Key of the call that announces the upload. */
  uploadKey: string
  person: string
  submissionId: string
  addedAt: number
  state: 'waiting' | 'sending' | 'refused'
  /** 0 to 1 while a file is going up. */
  progress: number
  problem: { code: string, sentence: string, issues: { path: string, message: string }[] } | null
}

/** Something taken or typed at the bench that the server has not yet said it has. Plain data: kept in the browser's database. */
export type OutboxItem = Common & (
  | { kind: 'photo', parcel: Parcel, input: Omit<PhotoInput, 'uploadId'> }
  | { kind: 'flow-sheet', parcel: Parcel, input: Omit<SheetInput, 'uploadId'> }
  | { kind: 'document', parcel: Parcel, input: { note: string } }
  | { kind: 'reading', input: ReadingInput }
)

export function newParcel(file: File): Parcel {
  return { blob: file, filename: file.name || 'photo.jpg', contentType: file.type || 'application/octet-stream', sha256: null, uploadId: null, partsDone: [], sent: false, completed: false }
}
