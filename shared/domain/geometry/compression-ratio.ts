/** Volumes above the piston at the top of its stroke, cc. A dome counts as a negative dish. */
export interface ClearanceVolumes { sweptCc: number, chamberCc: number, gasketCc: number, deckCc: number, dishCc: number }

/**
 * Compression ratio: 1 + swept / (chamber + gasket + deck + dish).
 *
 * Units: cc.
 * Source: handbook 8.12.
 *
 * @throws {RangeError} on a swept or chamber volume not above zero, another that is not finite, or no room left above the piston
 * @example
 * compressionRatio({ sweptCc: 443.3, chamberCc: 41.2, gasketCc: 6.32, deckCc: 2.22, dishCc: 6 }) // => 8.95
 */
export function compressionRatio({ sweptCc, chamberCc, gasketCc, deckCc, dishCc }: ClearanceVolumes): number {
  if (!(sweptCc > 0) || !(chamberCc > 0) || ![sweptCc, chamberCc, gasketCc, deckCc, dishCc].every(Number.isFinite)) throw new RangeError('compressionRatio requires volumes above zero')
  const clearance = chamberCc + gasketCc + deckCc + dishCc
  if (!(clearance > 0)) throw new RangeError('compressionRatio requires room above the piston')
  return 1 + sweptCc / clearance
}

/**
 * Volume of a disc: a crushed gasket, or the gap from piston to deck.
 *
 * Units: mm; cc.
 *
 * @throws {RangeError} on a bore not above zero or a negative thickness
 */
export function discVolume(boreMm: number, thicknessMm: number): number {
  if (!(boreMm > 0) || !Number.isFinite(boreMm) || !(thicknessMm >= 0) || !Number.isFinite(thicknessMm)) throw new RangeError('discVolume requires a bore above zero and a thickness of at least zero')
  return Math.PI / 4 * boreMm * boreMm * thicknessMm / 1000
}
