import type { LimitBand, LimitView } from '#shared/contract/lessons'
import type { Criterion } from '#shared/domain/rubric/criterion'
import { pickBands, type ResolvedBand } from '#shared/domain/rubric/pick-band'
import type { Side } from '#shared/domain/units/port'
import { bandInWords, figureInWords } from './band-in-words'

/** Quantities whose soft end is metal that must stay, whatever else is well. */
const ofMetal = new Set(['wall-thickness', 'guide-boss-width', 'bore-line-margin', 'seat-land'])

/** A criterion with its bands for one casting. Bands of one side, wall or lift each say which. */
export function limitView(criterion: Criterion, casting: { code: string, name: string, scope: string } | null): LimitView {
  const scope = casting?.scope ?? '*'
  const ofBoth = pickBands(criterion, scope, null)
  const bands = [...ofBoth.map(band => toBand(criterion, band, null)), ...(['intake', 'exhaust'] as const).flatMap((side) => {
    // A side's own bands are those a port of it has and the whole head has not.
    const own = pickBands(criterion, scope, side).filter(band => !ofBoth.some(one => JSON.stringify(one) === JSON.stringify(band)))
    return own.map(band => toBand(criterion, band, side))
  })]
  return { criterion: criterion.id, title: criterion.title, unit: criterion.unit, bands, casting: casting && { code: casting.code, name: casting.name } }
}

function toBand(criterion: Criterion, resolved: ResolvedBand, side: Side | null): LimitBand {
  const { at, liftShare, ...band } = resolved
  const hardLeast = ofMetal.has(criterion.quantity) && band.loKind === 'no-return' && band.lo !== null && band.softLo !== null && band.softLo < band.lo ? band.softLo : null
  return { band, side, at, liftShare, words: bandInWords(band, criterion.unit), hard: hardLeast === null ? null : `Hard least ${figureInWords(hardLeast, criterion.unit)}: never under it.` }
}
