/**
 * A number from -1 to 1 that looks like chance and is the same every time for the same words: a seeded school is the same school
 * wherever and whenever it is seeded.
 *
 * The hash is FNV-1a with 32 bits and a last stir (constants from memory).
 */
export function steadyNoise(...words: (string | number | null)[]): number {
  let hash = 0x811C9DC5
  for (const letter of words.join('|')) {
    hash ^= letter.codePointAt(0) ?? 0
    hash = Math.imul(hash, 0x01000193)
  }
  hash ^= hash >>> 15
  hash = Math.imul(hash, 0x2C1B3C6D)
  hash ^= hash >>> 13
  return (hash >>> 0) / 0xFFFFFFFF * 2 - 1
}
