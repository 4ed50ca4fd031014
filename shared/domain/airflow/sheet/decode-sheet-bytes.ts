/**
 * Text of a delimited sheet from its bytes: UTF-8 with or without its mark, UTF-16 with its mark, else the older 8-bit set
 * Windows-1252, in which every byte means something.
 */
export function decodeSheetBytes(bytes: Uint8Array): string {
  const marks: [number, number, string][] = [[0xFF, 0xFE, 'utf-16le'], [0xFE, 0xFF, 'utf-16be']]
  for (const [first, second, encoding] of marks) {
    if (bytes[0] === first && bytes[1] === second) return new TextDecoder(encoding).decode(bytes)
  }
  try {
    return new TextDecoder('utf-8', { fatal: true }).decode(bytes)
  }
  catch {
    return new TextDecoder('windows-1252').decode(bytes)
  }
}
