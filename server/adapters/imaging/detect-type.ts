import { fileTypeFromBuffer } from 'file-type'

/**
 * The media type of a file from its first bytes.
 *
 * Known signatures come from `file-type`. What has none is text or is not: text that a browser would take for a page or a
 * drawing is named as such, so that nobody serves it inline by mistake.
 */
export async function detectType(firstBytes: Uint8Array): Promise<string> {
  const head = firstBytes.subarray(0, 4096)
  // The mark of UTF-16 is also how some sound files begin; only a text has no controls behind it.
  const marked = head.length > 2 && hasUtf16Mark(head) && asText(head) !== null
  const known = marked ? undefined : await fileTypeFromBuffer(head).catch(() => undefined)
  if (known && known.mime !== 'application/xml') return known.mime
  const text = asText(head)
  if (text === null) return 'application/octet-stream'
  if (/<svg[\s>]/i.test(text)) return 'image/svg+xml'
  if (/<(!doctype\s+html|html|head|body|script|iframe|style|title|a|img|div|p|h1|br)[\s/>]/i.test(text)) return 'text/html'
  return known?.mime ?? 'text/plain'
}

/** Null when these cannot be characters of a text file. */
function asText(head: Uint8Array): string | null {
  // Windows-1252 gives every byte a character; what text never has are the controls.
  const encoding = !hasUtf16Mark(head) ? 'windows-1252' : head[0] === 0xff ? 'utf-16le' : 'utf-16be'
  const text = new TextDecoder(encoding).decode(head)
  return hasControls(text) ? null : text
}

const hasUtf16Mark = (head: Uint8Array) => (head[0] === 0xff && head[1] === 0xfe) || (head[0] === 0xfe && head[1] === 0xff)

function hasControls(text: string): boolean {
  for (let at = 0; at < text.length; at++) {
    const code = text.charCodeAt(at)
    if (code < 0x20 && code !== 0x09 && code !== 0x0a && code !== 0x0c && code !== 0x0d && code !== 0x1b) return true
  }
  return false
}
