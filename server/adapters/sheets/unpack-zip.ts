import { Inflate } from 'fflate'
import { AdapterRefusal } from '../adapter-refusal'

export interface ZipLimits { bytes: number, entries: number }

const unreadable = () => new AdapterRefusal('sheet_unreadable', 'The spreadsheet cannot be opened. Save it again as XLSX, or send it as CSV.')
const tooLarge = () => new AdapterRefusal('sheet_too_large', 'The spreadsheet unpacks to more than a flow sheet can be. Send only the sheet with the readings.')

/**
 * The files in a ZIP, unpacked with a bound on what may come out.
 *
 * What the directory says is added up first, which refuses an honest bomb at once; what really comes out is counted while it does,
 * which refuses one that lies.
 *
 * @throws {AdapterRefusal} sheet_unreadable, sheet_too_large
 */
export function unpackZip(file: Uint8Array, limits: ZipLimits): Map<string, Uint8Array> {
  const entries = readDirectory(file, limits)
  if (entries.reduce((sum, entry) => sum + entry.bytes, 0) > limits.bytes) throw tooLarge()
  const files = new Map<string, Uint8Array>()
  let left = limits.bytes
  for (const entry of entries) {
    if (entry.name.endsWith('/')) continue
    const body = entry.method === 0 ? entry.packed : inflate(entry.packed, left)
    left -= body.byteLength
    if (left < 0) throw tooLarge()
    if (body.byteLength !== entry.bytes) throw unreadable()
    files.set(entry.name, body)
  }
  return files
}

type Entry = { name: string, method: number, bytes: number, packed: Uint8Array }

/** The central directory (APPNOTE 4.3.12 and 4.3.16). ZIP64 is not read: nothing of ours needs it. */
function readDirectory(file: Uint8Array, limits: ZipLimits): Entry[] {
  const view = new DataView(file.buffer, file.byteOffset, file.byteLength)
  try {
    let end = file.byteLength - 22
    // The comment after it is at most 65,535 bytes.
    const stop = Math.max(0, end - 65_535)
    while (end >= stop && view.getUint32(end, true) !== 0x06054b50) end--
    if (end < stop || end < 0) throw unreadable()
    const count = view.getUint16(end + 10, true)
    if (count === 0xffff || count > limits.entries) throw tooLarge()
    let at = view.getUint32(end + 16, true)
    const entries: Entry[] = []
    for (let n = 0; n < count; n++) {
      if (view.getUint32(at, true) !== 0x02014b50) throw unreadable()
      const flags = view.getUint16(at + 8, true)
      const method = view.getUint16(at + 10, true)
      const packedBytes = view.getUint32(at + 20, true)
      const bytes = view.getUint32(at + 24, true)
      const nameLength = view.getUint16(at + 28, true)
      const local = view.getUint32(at + 42, true)
      const name = new TextDecoder().decode(file.subarray(at + 46, at + 46 + nameLength))
      if (flags & 1) throw new AdapterRefusal('sheet_unreadable', 'The spreadsheet is locked with a password. Save it without one and send it again.')
      if (method !== 0 && method !== 8) throw unreadable()
      if (view.getUint32(local, true) !== 0x04034b50) throw unreadable()
      const start = local + 30 + view.getUint16(local + 26, true) + view.getUint16(local + 28, true)
      if (start + packedBytes > file.byteLength) throw unreadable()
      entries.push({ name, method, bytes, packed: file.subarray(start, start + packedBytes) })
      at += 46 + nameLength + view.getUint16(at + 30, true) + view.getUint16(at + 32, true)
    }
    return entries
  }
  catch (thrown) {
    // A number that points outside the file.
    if (thrown instanceof RangeError) throw unreadable()
    throw thrown
  }
}

function inflate(packed: Uint8Array, most: number): Uint8Array {
  const chunks: Uint8Array[] = []
  let bytes = 0
  const inflater = new Inflate((chunk) => {
    bytes += chunk.byteLength
    if (bytes > most) throw tooLarge()
    chunks.push(chunk)
  })
  try {
    // In small bites: one bite can come out a thousand times larger.
    for (let at = 0; at < packed.byteLength; at += 16_384) inflater.push(packed.subarray(at, at + 16_384), at + 16_384 >= packed.byteLength)
  }
  catch (thrown) {
    throw thrown instanceof AdapterRefusal ? thrown : unreadable()
  }
  const whole = new Uint8Array(bytes)
  let at = 0
  for (const chunk of chunks) {
    whole.set(chunk, at)
    at += chunk.byteLength
  }
  return whole
}
