import { convert } from '../domain/units/convert'
import { parseTypedNumber } from '../domain/units/parse-typed-number'
import type { ReadingQuantity } from './quantities'

/** What is wrong with one typed figure, by where it stood. */
export interface TypedIssue { path: string, code: string, message: string }

/** Figures in the base unit, or every reason they cannot be taken. */
export type TypedValues = { ok: true, values: number[] } | { ok: false, issues: TypedIssue[] }

const spelled: Readonly<Record<string, string>> = { '°C': 'degC', '°F': 'degF', 'mm²': 'mm2', 'cm²': 'cm2', 'cm3': 'cc', 'cm³': 'cc' }

/** The name of a unit as the unit table has it. */
export function unitName(unit: string): string {
  return Object.hasOwn(spelled, unit) ? spelled[unit] ?? unit : unit
}

/**
 * Repeats of one quantity as typed, brought to its base unit. A figure that can be read two ways is asked about, never guessed.
 *
 * @example
 * typedValues(throat, 'in', ['1.614']) // => { ok: true, values: [40.9956] }
 */
export function typedValues(quantity: ReadingQuantity, unit: string, typed: readonly string[]): TypedValues {
  const name = unitName(unit)
  if (!quantity.units.includes(name)) return { ok: false, issues: [{ path: 'unit', code: 'unit-unfit', message: `The ${quantity.title} is typed in ${quantity.units.join(' or ')}.` }] }
  const issues: TypedIssue[] = []
  const values = typed.map((text, index) => {
    const one = quantity.kind === 'yes/no' ? yesOrNo(text) : numberOf(quantity, text)
    if (typeof one === 'number') return quantity.baseUnit === name ? one : convert(one, name, quantity.baseUnit)
    issues.push({ path: `values.${index}`, ...one })
    return 0
  })
  return issues.length > 0 ? { ok: false, issues } : { ok: true, values }
}

function numberOf(quantity: ReadingQuantity, text: string): number | Omit<TypedIssue, 'path'> {
  const read = parseTypedNumber(text)
  if (!read.ok) return { code: read.code, message: read.message }
  if (quantity.kind === 'count' && !(Number.isInteger(read.value) && read.value >= 0)) return { code: 'not-a-count', message: `"${text}" is not a count. Type how many there are.` }
  return read.value
}

function yesOrNo(text: string): number | Omit<TypedIssue, 'path'> {
  const word = text.trim().toLowerCase()
  if (word === 'yes' || word === '1') return 1
  if (word === 'no' || word === '0') return 0
  return { code: 'not-yes-or-no', message: 'Answer yes or no.' }
}
