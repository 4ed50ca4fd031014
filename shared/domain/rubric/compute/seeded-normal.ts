/**
 * Standard normal draws that are the same for the same seed, so that a drawn doubt can be had again.
 *
 * A 32-bit generator (a Weyl step and two mixing rounds, after Steele and others, "SplitMix", from memory) and Box and Muller's pairs;
 * good for ten thousand draws of a shape, not for secrets.
 *
 * @throws {RangeError} unless the seed is a whole number from 0 to 2^32 - 1
 */
export function seededNormal(seed: number): () => number {
  if (!Number.isInteger(seed) || seed < 0 || seed > 0xFFFFFFFF) throw new RangeError('seededNormal requires a seed from 0 to 4294967295')
  let state = seed >>> 0
  const uniform = (): number => {
    state = (state + 0x9E3779B9) >>> 0
    let mixed = state
    mixed = Math.imul(mixed ^ (mixed >>> 16), 0x21F0AAAD)
    mixed = Math.imul(mixed ^ (mixed >>> 15), 0x735A2D97)
    // Half a step in, so that the logarithm never meets zero.
    return (((mixed ^ (mixed >>> 15)) >>> 0) + 0.5) / 0x1_0000_0000
  }
  return () => Math.sqrt(-2 * Math.log(uniform())) * Math.cos(2 * Math.PI * uniform())
}
