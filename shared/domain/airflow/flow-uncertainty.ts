/**
 * Doubt of a reading, k = 2: a share of the flow and a fixed part, in quadrature.
 * Source: handbook 2.0, school design values until the school's own gauge study.
 */
const budgets = {
  /** In a change on one bench, plate-corrected. */
  change: { share: 0.007, fixedCfm: 0.25 },
  absolute: { share: 0.010, fixedCfm: 0.30 },
} as const

/**
 * Expanded uncertainty (k = 2) of one flow reading at the one basis.
 *
 * `ownRepeat` is a person's pooled repeat, one standard deviation as a share (0.0042 for 0.42 %): where 2 s is larger than the
 * share of the budget it takes its place. It is never used to make the doubt smaller.
 *
 * Units: cfm; cfm.
 * Source: handbook 2.0 and 8.10.
 *
 * @throws {RangeError} when the flow is negative or not finite, or the repeat is not
 * @example
 * flowUncertainty(125.85, 'change') // => 0.916
 */
export function flowUncertainty(cfm28: number, use: keyof typeof budgets, ownRepeat: number | null = null): number {
  if (!Number.isFinite(cfm28) || cfm28 < 0) throw new RangeError('flowUncertainty requires a flow of at least zero')
  if (ownRepeat !== null && !(ownRepeat >= 0 && Number.isFinite(ownRepeat))) throw new RangeError('flowUncertainty requires a repeat of at least zero')
  const { share, fixedCfm } = budgets[use]
  return Math.hypot(Math.max(share, 2 * (ownRepeat ?? 0)) * cfm28, fixedCfm)
}
