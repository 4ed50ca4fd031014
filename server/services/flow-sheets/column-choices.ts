import { z } from 'zod'
import { Refusal } from '#server/utils/refusal'
import type { SheetInput } from '#shared/contract/inputs'
import { unitKinds } from '#shared/domain/airflow/sheet/heading-words'
import { plainText } from '#shared/domain/airflow/sheet/plain-text'
import type { ColumnChoices, ColumnQuantity, SheetUnit } from '#shared/domain/airflow/sheet/sheet-reading'
import { findUnitWord } from '#shared/domain/airflow/sheet/unit-words'

export const columnQuantity = z.enum(['lift', 'pressure', 'flow', 'reading', 'range', 'leak', 'note', 'date', 'plate', 'temperature', 'barometer', 'humidity', 'run', 'cylinder', 'side', 'other'] satisfies [ColumnQuantity, ...ColumnQuantity[]])

/**
 * What a person chose for the columns, as the reader takes it.
 *
 * @throws {Refusal} input_invalid for a meaning no column has, or a unit that meaning cannot be in
 */
export function columnChoices(chosen: NonNullable<SheetInput['columns']>): ColumnChoices {
  const issues: { path: string, code: string, message: string }[] = []
  const choices: ColumnChoices = {}
  chosen.forEach(({ index, meaning, unit }, at) => {
    const quantity = columnQuantity.safeParse(meaning)
    if (!quantity.success) {
      issues.push({ path: `columns.${at}.meaning`, code: 'meaning-unknown', message: `A column can be ${columnQuantity.options.join(', ')}; "${meaning}" is none of them.` })
      return
    }
    if (unit === undefined || unit === '') {
      choices[String(index)] = { quantity: quantity.data }
      return
    }
    const known = sheetUnit(unit, quantity.data)
    if (known === null) issues.push({ path: `columns.${at}.unit`, code: 'unit-unfit', message: `"${unit}" is no unit of ${meaning}.` })
    else choices[String(index)] = { quantity: quantity.data, unit: known }
  })
  if (issues.length > 0) throw new Refusal('input_invalid', issues[0]?.message, { issues })
  return choices
}

/**
 * Columns as a person types them into the reader's question, counted from 1: "1 lift mm, 3 flow cfm".
 *
 * @throws {Refusal} input_invalid for what cannot be read so
 */
export function typedColumns(text: string): NonNullable<SheetInput['columns']> {
  return text.split(/[,;\n]/).filter(part => part.trim() !== '').map((part) => {
    const [, number, meaning = '', unit] = /^\s*(?:column\s+)?(\d{1,2})\W+([a-z]+)(?:\s+(\S.*?))?\s*$/i.exec(part) ?? []
    const message = `"${part.trim()}" does not name a column. Count from 1 and say what it is and in what unit: 1 lift mm, 2 flow cfm.`
    if (!number || Number(number) === 0) throw new Refusal('input_invalid', message, { issues: [{ path: 'answers.columns', code: 'column-unreadable', message }] })
    return { index: Number(number) - 1, meaning: meaning.toLowerCase(), ...(unit === undefined ? {} : { unit }) }
  })
}

/** A unit as people write it, of a kind the quantity can be in (of any kind without one); null when it is none. */
export function sheetUnit(text: string, quantity?: ColumnQuantity): SheetUnit | null {
  const kinds = quantity === undefined ? [...new Set(Object.values(unitKinds).flat())] : unitKinds[quantity] ?? []
  const plain = plainText(text)
  for (const kind of kinds) {
    const found = findUnitWord(plain, kind)
    // The whole of it: "in" is no unit of flow because "cfm in" has one.
    if (found && found.start === 0 && found.end === plain.length) return found.unit
  }
  return null
}
