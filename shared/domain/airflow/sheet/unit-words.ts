import type { SheetUnit } from './sheet-reading'

/** What kind of quantity a unit is looked for. "in" is a word too, so a unit is only sought where its kind is expected. */
export type UnitKind = 'length' | 'flow' | 'pressure' | 'temperature' | 'ratio' | 'density'

const water = '(?:h2o|h20|water|w\\.?\\s?c\\.?|w\\.?\\s?g\\.?|w\\.?\\s?s\\.?|aq|wasser\\w*)'
const between = '[\\s._-]*(?:of\\s+)?'

/** Spellings of units, the longer before the shorter they contain. */
const spellings: Record<UnitKind, [RegExp, SheetUnit][]> = {
  pressure: [
    [new RegExp(`(?:\\bin(?:ch(?:es)?)?\\.?|")${between}${water}(?![a-z])|\\biwg\\b|\\binwc\\b`, 'i'), 'inH2O'],
    [new RegExp(`\\bmm${between}${water}(?![a-z])`, 'i'), 'mmH2O'],
    [new RegExp(`\\bcm${between}${water}(?![a-z])`, 'i'), 'cmH2O'],
    [new RegExp(`(?:\\bin(?:ch(?:es)?)?\\.?|")${between}(?:hg|mercury)\\b`, 'i'), 'inHg'],
    [new RegExp(`\\bmm${between}(?:hg|mercury)\\b|\\btorr\\b`, 'i'), 'mmHg'],
    [/\bkpa\b|\bkilopascals?\b/i, 'kPa'],
    [/\bhpa\b|\bhectopascals?\b/i, 'hPa'],
    [/\bmbars?\b|\bmillibars?\b|\bmb\b/i, 'mbar'],
    [/\bpa\b|\bpascals?\b/i, 'Pa'],
    [/\bpsi\b|\blb\/in2\b/i, 'psi'],
    [/\bbar\b/i, 'bar'],
  ],
  flow: [
    [/\bs?cfm\b|\bft3\s*\/\s*min\b|\bcu\.?\s*ft\.?\s*(?:\/|per)\s*min\b|\bcubic feet per minute\b/i, 'cfm'],
    [/\bl(?:it(?:re|er)s?)?\.?\s*(?:\/|per)\s*s(?:ec(?:ond)?s?)?\b|\blps\b|\bdm3\s*\/\s*s\b/i, 'l/s'],
    [/\bl(?:it(?:re|er)s?)?\.?\s*(?:\/|per)\s*min(?:ute)?s?\b|\blpm\b/i, 'l/min'],
    [/\b(?:m3|m\^3|cubic met(?:re|er)s?|cbm)\s*(?:\/|per)\s*h(?:r|our)?s?\b|\bcmh\b/i, 'm3/h'],
    [/\b(?:m3|m\^3)\s*(?:\/|per)\s*min\b/i, 'm3/min'],
    [/\b(?:m3|m\^3)\s*(?:\/|per)\s*s(?:ec)?\b/i, 'm3/s'],
    [/\bkg\s*(?:\/|per)\s*h(?:r|our)?\b/i, 'kg/h'],
    [/\bkg\s*(?:\/|per)\s*min\b/i, 'kg/min'],
    [/\bkg\s*(?:\/|per)\s*s(?:ec)?\b/i, 'kg/s'],
    [/\bg\s*(?:\/|per)\s*s(?:ec)?\b/i, 'g/s'],
    [/\blbs?\s*(?:\/|per)\s*min\b/i, 'lb/min'],
  ],
  length: [
    [/\bl(?:ift)?\s*(?:\/|:|over)\s*d(?:ia\w*)?\b|\blift\s*\/\s*valve\b|\bx\s*d\b/i, 'lift/diameter'],
    [/\bthous?\b|\bmils?\b|(?:^|[^\d])0?[.,]001\s*(?:in(?:ch)?|")|\b1\/1000\s*(?:in|")|\bthousandths? of an inch\b/i, 'thou'],
    [/(?:\b|\d)mm\b|\bmillimet(?:re|er)s?\b/i, 'mm'],
    [/(?:\b|\d)cm\b|\bcentimet(?:re|er)s?\b/i, 'cm'],
    [/(?:\b|\d)in(?:ch(?:es)?)?\b|"/i, 'in'],
  ],
  temperature: [
    [/(?:°|\bdeg\.?)\s*f\b|\bfahrenheit\b|\d\s*f\b|^f$|[( [](?:°\s*)?f[)\]]|\sf$/i, 'degF'],
    [/(?:°|\bdeg\.?)\s*c\b|\bcelsius\b|\d\s*c\b|^c$|[( [](?:°\s*)?c[)\]]|\sc$|\sc\s/i, 'degC'],
    [/\d\s*k\b|\bkelvin\b|[( []k[)\]]|\sk$/i, 'K'],
  ],
  ratio: [
    [/\u2030|\bthousandths?\b|\bper ?mill?e?\b|\bparts per thousand\b|\/\s*1000\b/i, 'thousandths'],
    [/%|\bper ?cent\b|\bpercent\b|\bpct\b/i, 'percent'],
  ],
  density: [
    [/\bkg\s*\/\s*m3\b/i, 'kg/m3'],
    [/\bg\s*\/\s*(?:cc|cm3)\b/i, 'g/cc'],
  ],
}

/** A unit found in a text, and where, so that it can be cut out. */
export interface FoundUnit { unit: SheetUnit, start: number, end: number }

/** The first unit of the kind in a plain text; null when there is none. Spellings are tried longest first, not leftmost first. */
export function findUnitWord(text: string, kind: UnitKind): FoundUnit | null {
  for (const [pattern, unit] of spellings[kind]) {
    const match = pattern.exec(text)
    if (match) return { unit, start: match.index, end: match.index + match[0].length }
  }
  return null
}

/** The text without its units of the kinds, so that the "min" of l/min is not taken for a minimum. */
export function withoutUnits(text: string): string {
  let rest = text
  for (const kind of ['pressure', 'flow', 'density'] as const) {
    for (;;) {
      const found = findUnitWord(rest, kind)
      if (!found) break
      rest = `${rest.slice(0, found.start)} ${rest.slice(found.end)}`
    }
  }
  return rest
}
