/**
 * A Content-Disposition with any file name in it: plain letters for old readers, the whole name beside it (RFC 6266, RFC 8187).
 */
export function contentDisposition(kind: 'attachment' | 'inline', filename: string): string {
  const plain = filename.normalize('NFKD').replace(/[^\x20-\x7e]/g, '').replace(/["\\%/;]/g, '_').trim() || 'file'
  const whole = encodeURIComponent(filename.toWellFormed()).replace(/['()*]/g, character => `%${character.charCodeAt(0).toString(16).toUpperCase()}`)
  return `${kind}; filename="${plain}"; filename*=UTF-8''${whole}`
}
