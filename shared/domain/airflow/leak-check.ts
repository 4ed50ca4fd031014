import { assertPositive } from './assert-positive'

/** A leak with the valve shut, set against the school's limits and the lowest reading. */
export interface LeakCheck {
  state: 'accept' | 'borderline' | 'reject'
  /** Leak over the flow at the lowest lift, leak still in it, per cent. */
  shareOfLowestPercent: number
}

/** cfm at 28 inH2O. Source: handbook 3.6 (B-06), school design values. */
const limits = { accept: 0.8, soft: 1.5 }

/**
 * Whether a leak is small enough to take off, or must be cured.
 *
 * Units: cfm at the one basis.
 * Source: handbook 4.4 and B-06.
 *
 * @throws {RangeError} when the leak is negative or not finite, or the lowest flow not above zero
 */
export function leakCheck(leakCfm28: number, lowestCfm28: number): LeakCheck {
  assertPositive('leakCheck', { 'flow at the lowest lift': lowestCfm28 })
  if (!Number.isFinite(leakCfm28) || leakCfm28 < 0) throw new RangeError('leakCheck requires a leak of at least zero')
  const state = leakCfm28 <= limits.accept ? 'accept' : leakCfm28 <= limits.soft ? 'borderline' : 'reject'
  return { state, shareOfLowestPercent: 100 * leakCfm28 / lowestCfm28 }
}
