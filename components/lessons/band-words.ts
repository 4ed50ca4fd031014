import { inOtherUnit, withoutDoubt, writtenUnit } from '../ui/both-units'
import type { GaugeBand } from '../rubric/gauge-layout'

/**
 * An accept band as it is said at the bench, in the unit it was set in and in the other one; `other` is empty where there is none.
 * Both ends are written with the decimals of the finer one.
 *
 * @example
 * bandWords({ lo: 1.52, hi: 1.78, ... }, 'mm') // => { own: '1.52 to 1.78 mm', other: '0.060 to 0.070 in' }
 * bandWords({ lo: 4, hi: null, ... }, 'mm') // => { own: '4 mm or more', other: '0.16 in or more' }
 */
export function bandWords(band: Pick<GaugeBand, 'lo' | 'hi'>, unit: string): { own: string, other: string } {
  const ends = [band.lo, band.hi].filter(end => end !== null)
  const decimals = Math.max(0, ...ends.map(end => withoutDoubt(end).decimals))
  const unitWord = writtenUnit(unit)
  const own = (end: number) => end.toFixed(decimals).replace('-', '\u2212')
  const both = ends.map(end => inOtherUnit(end, unit, Math.max(decimals, 2))?.replace('-', '\u2212') ?? null)
  const say = (lo: string | null, hi: string | null, word: string) => {
    if (lo !== null && hi !== null) return lo === hi ? `${lo} ${word}`.trim() : `${lo} to ${hi} ${word}`.trim()
    return lo !== null ? `${lo} ${word}`.trim() + ' or more' : `at most ${`${hi} ${word}`.trim()}`
  }
  if (!ends.length) return { own: 'no limit', other: '' }
  const [first = null, second = null] = both.map(text => text && text.slice(0, text.lastIndexOf(' ')))
  const otherUnit = both[0]?.slice(both[0].lastIndexOf(' ') + 1) ?? ''
  return {
    own: say(band.lo === null ? null : own(band.lo), band.hi === null ? null : own(band.hi), unitWord),
    other: first === null ? '' : say(band.lo === null ? null : first, band.hi === null ? null : band.lo === null ? first : second, otherUnit),
  }
}
