/** Why a typed number was refused. Stable: the server sends it on. */
export type TypedNumberRefusal = 'empty' | 'too-long' | 'not-a-number' | 'comma-or-thousands' | 'too-many-separators'

/** A number as a person typed it, or the reason it cannot be taken. */
export type TypedNumber =
  | { ok: true, value: number, /** One unit of the last digit typed: 0.01 for "41.98", 1 for "42". */ resolution: number }
  | { ok: false, code: TypedNumberRefusal, message: string }

/** What is already known of how this person, or this sheet, writes numbers. */
export interface TypedNumberHabits {
  /** The sign between whole and part. Leave out when nothing is known: then "1,234" is asked about. */
  decimal?: '.' | ','
}

const longest = 40

/**
 * A number as a person types it at a bench: point or comma for the decimals, spaces or the other sign for thousands.
 *
 * "41.98" and "41,98" are the same number. "1,234" could be 1.234 or 1234 and is refused with a question, unless the habit is known.
 * Exponents, hex, NaN and the like are not how a reading is written and are refused; so is anything with letters in it.
 * A point alone is always a decimal point ("1.234" is 1.234) unless the habit says comma: inch readings carry three decimals.
 *
 * Units: none; the caller knows the unit.
 *
 * @example
 * parseTypedNumber('41,98') // => { ok: true, value: 41.98, resolution: 0.01 }
 */
export function parseTypedNumber(typed: string, habits: TypedNumberHabits = {}): TypedNumber {
  if (typed.length > longest) return refuse('too-long', `That is ${typed.length} characters long. Type the number as it stands on the instrument.`)
  const text = typed.trim().replace(/^[\u2212\u2013]/, '-')
  if (text === '') return refuse('empty', 'Nothing was typed. Type the number as it stands on the instrument.')

  const whole = /^([+-]?)([\d.,' \u00A0\u2009\u202F]+)$/.exec(text)
  if (!whole || !/\d/.test(text)) return refuse('not-a-number', `"${printable(text)}" is not a number. Type digits, with a point or a comma before the decimals.`)
  const sign = whole[1] === '-' ? -1 : 1
  const body = whole[2] ?? ''

  const split = splitDecimals(body, habits)
  if ('code' in split) return split
  if (split.whole === '' && split.part === '') return refuse('not-a-number', `"${printable(text)}" is not a number.`)
  const magnitude = Number(`${split.whole === '' ? '0' : split.whole}.${split.part === '' ? '0' : split.part}`)
  // "-0" on a dial is nought.
  const value = magnitude === 0 ? 0 : sign * magnitude
  return { ok: true, value, resolution: Number(`1e-${split.part.length}`) }
}

function splitDecimals(body: string, habits: TypedNumberHabits): { whole: string, part: string } | Extract<TypedNumber, { ok: false }> {
  const points = count(body, '.')
  const commas = count(body, ',')
  const tooMany = () => refuse('too-many-separators', `"${body}" has more points or commas than one number can have. Type one number.`)

  let decimal: string | null = null
  if (points > 0 && commas > 0) decimal = body.lastIndexOf('.') > body.lastIndexOf(',') ? '.' : ','
  else if (points === 1) decimal = habits.decimal === ',' && /^\d{1,3}\.\d{3}$/.test(body) ? null : '.'
  else if (commas === 1) {
    const couldBeThousands = /^[1-9]\d{0,2},\d{3}$/.test(body)
    if (couldBeThousands && habits.decimal === undefined) {
      return refuse('comma-or-thousands', `"${body}" can be read as ${body.replace(',', '.')} or as ${body.replace(',', '')}. Type it with a decimal point, or without the comma.`)
    }
    decimal = couldBeThousands && habits.decimal === '.' ? null : ','
  }
  else if (points > 1 && habits.decimal === '.') return tooMany()
  else if (commas > 1 && habits.decimal === ',') return tooMany()

  if (decimal !== null && count(body, decimal) > 1) return tooMany()
  const cut = decimal === null ? body.length : body.indexOf(decimal)
  const wholeText = body.slice(0, cut)
  const part = decimal === null ? '' : body.slice(cut + 1)
  if (!/^\d*$/.test(part)) return tooMany()

  if (/^\d*$/.test(wholeText)) return { whole: wholeText, part }
  // Thousands must be written properly, in groups of three with one sign throughout, or it is not one number.
  const grouped = /^\d{1,3}(?:([.,' \u00A0\u2009\u202F])\d{3})(?:\1\d{3})*$/.exec(wholeText)
  if (!grouped) return tooMany()
  return { whole: wholeText.replace(/\D/g, ''), part }
}

function count(text: string, sign: string): number {
  return text.split(sign).length - 1
}

/** What was typed, safe to show: no control characters, no halves of characters. */
function printable(text: string): string {
  return text.replace(/[^\P{C}]/gu, '?')
}

function refuse(code: TypedNumberRefusal, message: string): Extract<TypedNumber, { ok: false }> {
  return { ok: false, code, message }
}
