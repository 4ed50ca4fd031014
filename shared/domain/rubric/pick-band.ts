import type { Side } from '../units/port'
import type { AcceptBand, Criterion, EndKind } from './criterion'

/** One accept interval with the soft one round it, as a value is judged against. Null is an end that is not there. */
export interface ResolvedBand {
  lo: number | null
  hi: number | null
  loKind: EndKind
  hiKind: EndKind
  /** Ends of the hull of accept and soft. */
  softLo: number | null
  softHi: number | null
  borrowedFrom: string | null
  /** Wall the band is for; null when it is for every spot. */
  at: string | null
  /** Lift it is for, as a share of the valve head diameter; null when it is for every lift. */
  liftShare: number | null
}

/** Whether a scope of the rubric ("*", "D", "DI", "DI@0.12") covers this casting and side. A side of null is covered only by scopes without one. */
export function scopeCovers(scope: string, casting: string, side: Side | null): boolean {
  const [name = ''] = scope.split('@')
  if (name === '*' || name === casting) return true
  if (side === null) return false
  return name === casting + (side === 'intake' ? 'I' : 'E')
}

/**
 * The bands of a criterion that hold for a casting and side, each with the hull of the soft intervals of the same scope and wall.
 *
 * Empty when the criterion has none there (an intake criterion asked of an exhaust port).
 * Source: handbook 3, scopes; 3.1, S is the hull of accept and soft.
 *
 * @throws {RangeError} on a scope whose lift is not a number
 */
export function pickBands(criterion: Criterion, casting: string, side: Side | null): ResolvedBand[] {
  return criterion.accept.filter(band => scopeCovers(band.scope, casting, side)).map(band => resolve(band, criterion))
}

function resolve(band: AcceptBand, criterion: Criterion): ResolvedBand {
  const soft = criterion.soft.filter(one => one.scope === band.scope && one.at === band.at)
  const [, lift] = band.scope.split('@')
  const liftShare = lift === undefined ? null : Number(lift)
  if (liftShare !== null && !(liftShare > 0 && liftShare < 1)) throw new RangeError(`scope "${band.scope}" names no lift`)
  return {
    lo: band.lo,
    hi: band.hi,
    loKind: band.loKind,
    hiKind: band.hiKind,
    softLo: outermost([band.lo, ...soft.map(one => one.lo)], Math.min),
    softHi: outermost([band.hi, ...soft.map(one => one.hi)], Math.max),
    borrowedFrom: band.borrowedFrom ?? null,
    at: band.at ?? null,
    liftShare,
  }
}

/** An end that is missing anywhere is missing in the hull. */
function outermost(ends: (number | null)[], pick: (...ends: number[]) => number): number | null {
  const numbers = ends.filter((end): end is number => end !== null)
  return numbers.length < ends.length ? null : pick(...numbers)
}
