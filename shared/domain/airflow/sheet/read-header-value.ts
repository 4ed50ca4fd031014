import { convert } from '../../units/convert'
import { parseTypedNumber } from '../../units/parse-typed-number'
import type { UnitName } from '../../units/unit-table'
import { findUnitWord, type UnitKind } from './unit-words'
import type { SheetUnit } from './sheet-reading'
import type { Side } from '../../units/port'
import type { SheetHeader } from '../flow-run'

/** A number of the header with the unit it stands in; `nominal` where it was quoted by fraction or said to be so. */
export interface HeaderNumber { value: number, unit: SheetUnit | null, nominal: boolean, end: number }

const fraction = /(?<![\d.,/])(?:(\d{1,2})[\s-]+)?(\d{1,2})\/(2|4|8|16|32|64)(?![\d/])/

/**
 * The first number of a header value with its unit, before or after it: "1.614 in", "in 1.614", "5/16 nominal", "1.013,2 hPa".
 * Null when there is none. A fraction is in inches.
 */
export function readHeaderNumber(text: string, kind: UnitKind, decimal: '.' | ',' | undefined): HeaderNumber | null {
  // Units hide digits (H2O, m3/h), so they are blanked before a number is sought.
  const units = [findUnitWord(text, kind), kind === 'ratio' ? null : findUnitWord(text, 'pressure'), kind === 'ratio' ? null : findUnitWord(text, 'flow')]
  const blank = blankOut(text, units.filter(unit => unit !== null))
  const byFraction = kind === 'length' ? fraction.exec(blank) : null
  const match = /[+-]?(?:\d[\d.,']*\d|\d|[.,]\d+)/.exec(blank)
  if (byFraction && match && byFraction.index <= match.index) {
    const value = Number(byFraction[1] ?? 0) + Number(byFraction[2]) / Number(byFraction[3])
    return { value, unit: 'in', nominal: true, end: byFraction.index + byFraction[0].length }
  }
  if (!match) return null
  const typed = parseTypedNumber(match[0], decimal === undefined ? {} : { decimal })
  if (!typed.ok) return null
  const end = match.index + match[0].length
  // The unit right behind the number is its own; else one in front of it, as in "Valve dia in 1.614".
  const behind = findUnitWord(text.slice(end).slice(0, 24), kind)
  const front = findUnitWord(text.slice(0, match.index), kind)
  const unit = behind && /^[\s([]*$/.test(text.slice(end, end + behind.start)) ? behind.unit : front?.unit ?? behind?.unit ?? null
  return { value: typed.value, unit, nominal: /\bnominal\b/i.test(text), end }
}

function blankOut(text: string, spans: { start: number, end: number }[]): string {
  let result = text.replace(/h2o/gi, '   ')
  for (const { start, end } of spans) {
    // Only the digits: a unit may touch its number ("41.0mm").
    result = result.slice(0, start) + result.slice(start, end).replace(/h[2o]o|m\^?3|ft3|1\/1000|0?[.,]001/gi, found => ' '.repeat(found.length)) + result.slice(end)
  }
  return result
}

/** A number in the unit asked for, or null when its unit is missing or of another kind. */
export function inUnit(number: HeaderNumber | null, unit: UnitName): number | null {
  if (!number || number.unit === null) return null
  try {
    return convert(number.value, number.unit, unit)
  }
  catch {
    return null
  }
}

const sideWords: [Side, RegExp][] = [
  ['intake', /\b(?:intake|inlet|induction|int)\b/i],
  ['exhaust', /\b(?:exhaust|outlet|exh)\b/i],
]

/** Side named in a text; `alone` allows the short IN and EX, which elsewhere are inches and nothing. */
export function readSide(text: string, alone: boolean): Side | null {
  const named = sideWords.filter(([, pattern]) => pattern.test(text)).map(([side]) => side)
  if (named.length === 1) return named[0] ?? null
  if (named.length > 1 || !alone) return null
  if (/^\W*in\W*$/i.test(text) || /^\W*i\W*$/i.test(text)) return 'intake'
  if (/^\W*exh?\W*$/i.test(text) || /^\W*e\W*$/i.test(text)) return 'exhaust'
  return null
}

const stageWords: [NonNullable<SheetHeader['stage']>, RegExp][] = [
  ['short', /\bshort[\s-]*(?:turn|side)?\b|\bfloor\b/i],
  ['final', /\bfinal\b|\bfinished\b|\bcompleted?\b/i],
  ['base', /\bbase(?:line)?\b|\bas[\s-]+(?:received|cast|found|bought)\b|\bbefore\s+(?:any\s+)?(?:cutting|work)\b|\bstock\b|\buntouched\b|\boriginal\b/i],
  ['bowl', /\bbowls?\b/i],
  ['port', /\bport(?:ed|ing)?(?:\s+(?:walls?|done|work))?\b|\bwalls?\b|\brunner\b/i],
]

/** Stage named in a value; null when none or when it only speaks of a side. */
export function readStage(text: string): SheetHeader['stage'] {
  // "Port side" and "intake port" name the iron, not the work.
  const rest = text.replace(/\bport\s+side\b|\b(?:intake|inlet|exhaust|exh|int)\.?\s+port\b(?!\s+(?:done|work))/gi, ' ')
  return stageWords.find(([, pattern]) => pattern.test(rest))?.[0] ?? null
}

const numerals: Record<string, number> = { one: 1, two: 2, three: 3, four: 4, five: 5, six: 6, seven: 7, eight: 8 }

/** Cylinder number in a value, 1 to 16; null when there is none. */
export function readCylinder(text: string): number | null {
  const match = /(?<![\d.,-])#?(\d{1,2})(?![\d.,]*\d)/.exec(text)
  const number = match ? Number(match[1]) : numerals[text.trim().toLowerCase()] ?? 0
  return number >= 1 && number <= 16 ? number : null
}

/** Letters or numbers of ranges with their full scale: "A is 28, B is 55", "1 = 50; 2 = 100". */
export function readFullScale(text: string, decimal: '.' | ',' | undefined): Record<string, number> {
  const table: Record<string, number> = {}
  for (const [, name, digits] of text.matchAll(/(?<![\w.,])([A-Z]|[IVX]{1,4}|\d{1,2}|low|mid|medium|high)\s*(?:is|=|:|->|\u2192)\s*(\d[\d.,]*\d|\d)/gi)) {
    if (name === undefined || digits === undefined) continue
    const typed = parseTypedNumber(digits, decimal === undefined ? {} : { decimal })
    if (typed.ok && typed.value > 0) table[name.toUpperCase()] = typed.value
  }
  return table
}
