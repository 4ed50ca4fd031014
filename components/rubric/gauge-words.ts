import type { CriterionState } from '#shared/domain/rubric/criterion'
import { stateWords } from '../ui/state-words'
import { withoutDoubt, writeWithDoubt } from '../ui/with-doubt'
import { writtenUnit } from '../ui/written-unit'
import type { GaugeInput } from './gauge-layout'

/**
 * The gauge strip in words, for those who do not see it: the reading with its doubt, the band, which end has to be cleared, the state.
 *
 * @example
 * gaugeWords({ value: 3.31, expandedUncertainty: 0.15, band: { lo: 4, hi: null, loKind: 'no-return', ... }, must: true }, 'mm', 'reject')
 * // => '3.31 plus or minus 0.15 mm. Accepted from 4 mm up. As a must it has to clear 4 by its doubt. Reject.'
 */
export function gaugeWords(input: GaugeInput, unit: string, state: CriterionState | null): string {
  const { band, value, expandedUncertainty: doubt, must } = input
  const written = writtenUnit(unit)
  const sentences: string[] = []

  if (value === null) sentences.push('Not read.')
  else if (doubt !== null && doubt > 0) {
    const rounded = writeWithDoubt(value, doubt)
    sentences.push(`${rounded.value} plus or minus ${rounded.doubt} ${written}`.trim() + '.')
  }
  else sentences.push(`${withoutDoubt(value).value} ${written}`.trim() + '.')

  if (band) {
    const lo = band.lo === null ? null : String(Number(band.lo.toFixed(4)))
    const hi = band.hi === null ? null : String(Number(band.hi.toFixed(4)))
    if (lo !== null && hi !== null) sentences.push(lo === hi ? `Accepted at ${`${lo} ${written}`.trim()} only.` : `Accepted from ${lo} to ${`${hi} ${written}`.trim()}.`)
    else if (lo !== null) sentences.push(`Accepted from ${`${lo} ${written}`.trim()} up.`)
    else if (hi !== null) sentences.push(`Accepted up to ${`${hi} ${written}`.trim()}.`)
    const guarded = [band.loKind === 'no-return' ? lo : null, band.hiKind === 'no-return' ? hi : null].filter(end => end !== null)
    if (must && guarded.length && (doubt ?? 0) > 0) sentences.push(`As a must it has to clear ${guarded.join(' and ')} by its doubt.`)
  }
  if (state) sentences.push(`${stateWords[state]}.`)
  return sentences.join(' ')
}
