import type { LiftChange } from './change-per-lift'

/** What the changes of a whole sheet say about "no lift may lose". */
export interface FlowLossVerdict {
  state: 'accept' | 'borderline' | 'reject'
  /** Lifts that made it so, mm, rising; empty when accepted. */
  liftsMm: number[]
  /** True where the losses lie in the lower third of the lifts, which points at the seat edge. */
  atLowLifts: boolean
}

/** k = 2.8: one lift this far down is chance in 2.3 % of sheets. Source: handbook 3.2. */
const sureFactor = 1.4

/**
 * Reject only if two neighbouring lifts are lost beyond U, or one beyond 1.4 U; one lift between U and 1.4 U is borderline.
 *
 * With nine lifts each judged at 95 % the chance of at least one false loss is 20 %, which is why one alone is not enough.
 * "Neighbouring" is next to each other among the lifts compared.
 *
 * Source: handbook 3.2.
 *
 * @throws {RangeError} with no changes
 */
export function flowLossVerdict(changes: readonly LiftChange[]): FlowLossVerdict {
  if (changes.length === 0) throw new RangeError('flowLossVerdict requires at least one lift')
  const rising = [...changes].sort((a, b) => a.liftMm - b.liftMm)
  const lost = rising.map(change => change.changeCfm < -change.expandedUncertainty)
  const surely = rising.map(change => change.changeCfm < -sureFactor * change.expandedUncertainty)
  const liftsMm = rising.filter((_, i) => lost[i]).map(change => change.liftMm)
  const neighbours = lost.some((isLost, i) => isLost && lost[i + 1] === true)
  const state = neighbours || surely.includes(true) ? 'reject' : liftsMm.length > 0 ? 'borderline' : 'accept'
  const lowEnd = rising[Math.ceil(rising.length / 3) - 1]
  const atLowLifts = liftsMm.length > 0 && lowEnd !== undefined && liftsMm.every(lift => lift <= lowEnd.liftMm)
  return { state, liftsMm, atLowLifts }
}
