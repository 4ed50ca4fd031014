import { parseTypedNumber } from '../../units/parse-typed-number'
import { plainText } from './plain-text'

/** What a number cell turned out to hold. */
export type CellReading =
  | { kind: 'number', value: number, /** The digits as written. */ written: string, /** Whatever stood beside the number: a unit, a star. */ beside: string }
  | { kind: 'missing' }
  | { kind: 'ambiguous', message: string }
  | { kind: 'text', text: string }

const missingWords = /^(?:|-+|\.+|n\s*\/?\s*a|n\.a\.|#n\/a|na|nil|none|null|nan|x+|\?+|\/|missing|no reading|not read|not taken|skipped|void)$/i

/**
 * One cell of a table: a number with whatever stands beside it ("104,5 *", "22.8 cfm"), a missing reading, or text.
 *
 * `decimal` is the sheet's own habit where it is known; then "1.007" is a thousand and seven on a comma sheet.
 */
export function readCell(cell: string, decimal: '.' | ',' | undefined): CellReading {
  const text = plainText(cell)
  if (missingWords.test(text)) return { kind: 'missing' }
  const match = /^([*~(]?\s*)([+-]?(?:\d[\d.,' ]*\d|\d|[.,]\d+)[.,]?)(.*)$/.exec(text)
  if (!match) return { kind: 'text', text }
  const [, before = '', digits = '', after = ''] = match
  // "2026-03-05", "5/16", "12:30" and "1st" are not readings.
  if (/^\s*[-/:]\s*\d/.test(after) || /^[a-z]{2,}\d/i.test(after)) return { kind: 'text', text }
  const written = digits.trim().replace(/[.,]$/, '')
  const typed = parseTypedNumber(written, decimal === undefined ? {} : { decimal })
  if (typed.ok) return { kind: 'number', value: typed.value, written, beside: `${before}${after}`.trim() }
  if (typed.code === 'comma-or-thousands') return { kind: 'ambiguous', message: typed.message }
  return { kind: 'text', text }
}
