import type { Criterion } from './criterion'
import { decide } from './decide'
import { pickBands, type ResolvedBand } from './pick-band'
import { whichDoubt } from './which-doubt'

/** A band of a must in which no value could be accepted. */
export interface Unreachable { criterion: string, scope: string, why: string }

/**
 * Bands of a criterion that no value can meet, given the rubric's own U. Empty when every band can be met.
 *
 * Only a must can be unreachable by doubt; a band whose ends are the wrong way round is unreachable for everybody.
 * A rubric version with an unreachable must is refused when it is saved (`must_unreachable`).
 *
 * Source: handbook 3.1, first consequence.
 */
export function unreachableBands(criterion: Criterion): Unreachable[] {
  return criterion.accept.flatMap((accept): Unreachable[] => {
    const [name = '*'] = accept.scope.split('@')
    const side = name.endsWith('I') ? 'intake' as const : name.endsWith('E') ? 'exhaust' as const : null
    const casting = name === '*' ? '*' : name.slice(0, 1)
    const band = pickBands({ ...criterion, accept: [accept] }, casting, side)[0]
    if (!band || isReachable(criterion, band)) return []
    const doubt = whichDoubt(criterion, band.hi ?? band.lo ?? 0, null)
    return [{
      criterion: criterion.id,
      scope: accept.at === undefined ? accept.scope : `${accept.scope}, ${accept.at}`,
      why: `no value from ${band.lo ?? 'any'} to ${band.hi ?? 'any'} ${criterion.unit} is accepted${doubt === null ? '' : ` with U ${doubt}`}`,
    }]
  })
}

/** Whether some value is accepted: the ends, the middle, and each end moved inward by its own doubt. */
function isReachable(criterion: Criterion, band: ResolvedBand): boolean {
  const ends = [band.lo, band.hi].filter((end): end is number => end !== null)
  if (ends.length === 0) return true
  const inward = (end: number, way: 1 | -1): number[] => {
    const doubt = whichDoubt(criterion, end, null) ?? 0
    // A relative U moves with the value: three steps settle it far below any figure a person types.
    let at = end
    for (let step = 0; step < 3; step++) at = end + way * (whichDoubt(criterion, at, null) ?? doubt)
    return [end, end + way * doubt, at]
  }
  const candidates = [
    ...(band.lo === null ? [] : inward(band.lo, 1)),
    ...(band.hi === null ? [] : inward(band.hi, -1)),
    ends.reduce((sum, end) => sum + end, 0) / ends.length,
  ]
  return candidates.some((value) => {
    if (band.lo !== null && value < band.lo) return false
    if (band.hi !== null && value > band.hi) return false
    return decide(value, whichDoubt(criterion, value, null), band, criterion.mustPass).state === 'accept'
  })
}
