import { z } from 'zod'

const begunShape = z.object({ name: z.string(), bytes: z.number(), changedAt: z.number(), sha256: z.string(), uploadId: z.string(), mediaKey: z.string(), begunAt: z.number() })
/** A file on its way up as this device remembers it. A browser may not keep the file: it is chosen again, and known by name, size and date. */
export type BegunUpload = z.infer<typeof begunShape>

const key = 'witness-mark:films-begun'
/** The server forgets an upload nobody finished within a day. */
const keptFor = 24 * 3600_000

export function readBegun(): BegunUpload[] {
  try {
    const all = z.array(begunShape).parse(JSON.parse(localStorage.getItem(key) ?? '[]'))
    return all.filter(one => Date.now() - one.begunAt < keptFor)
  }
  catch {
    return []
  }
}

export const isOf = (begun: Pick<BegunUpload, 'name' | 'bytes' | 'changedAt'>, file: File): boolean => begun.name === file.name && begun.bytes === file.size && begun.changedAt === file.lastModified

export function keepBegun(upload: BegunUpload): void {
  write([...readBegun().filter(one => one.uploadId !== upload.uploadId), upload])
}

export function forgetBegun(uploadId: string): void {
  write(readBegun().filter(one => one.uploadId !== uploadId))
}

function write(all: BegunUpload[]): void {
  try {
    localStorage.setItem(key, JSON.stringify(all))
  }
  catch {
    // Without room on the device the film still goes up; only a reload begins it anew.
  }
}
