import { benchProfiles } from '#server/services/school/bench-profiles'
import { Refusal } from '#server/utils/refusal'
import type { SheetInput } from '#shared/contract/inputs'
import type { SheetHelp } from '#shared/domain/airflow/sheet/read-flow-sheet'
import type { ColumnChoices, SheetAnswers } from '#shared/domain/airflow/sheet/sheet-reading'
import { columnQuantities, isColumnQuantity, isSheetField, isSheetUnit, sheetUnits } from './sheet-words'

const columnKey = /^column:(\d{1,3})$/

/** Everything a person has said of a sheet, as it is kept with a reading: answers by field, and columns as `column:3` = `flow cfm`. */
export type KeptAnswers = Record<string, string>

/**
 * What was answered before with what is answered now: nobody answers twice. An empty answer takes an earlier one back.
 *
 * @throws {Refusal} input_invalid that names what the reader does not ask for
 */
export function mergeAnswers(before: KeptAnswers, input: Pick<SheetInput, 'bench' | 'columns' | 'answers'>): KeptAnswers {
  const given: [string, string, string][] = [
    ...Object.entries(input.answers ?? {}).map(([field, text]): [string, string, string] => [field, text, `answers.${field}`]),
    ...(input.bench === undefined ? [] : [['bench', input.bench, 'bench'] as [string, string, string]]),
    ...(input.columns ?? []).map(({ index, meaning, unit }, at): [string, string, string] => [`column:${index}`, unit ? `${meaning} ${unit}` : meaning, `columns.${at}`]),
  ]
  const issues = given.flatMap(([key, text, path]) => {
    if (isSheetField(key) || text === '') return []
    if (!columnKey.test(key)) return [{ path, message: `The reader asks for no "${key}".` }]
    const [quantity = '', unit] = text.split(' ')
    if (!isColumnQuantity(quantity)) return [{ path, message: `A column cannot hold "${quantity}". It can hold ${columnQuantities.join(', ')}.` }]
    return unit === undefined || isSheetUnit(unit) ? [] : [{ path, message: `There is no unit "${unit}". There are ${sheetUnits.join(', ')}.` }]
  })
  if (issues.length > 0) throw new Refusal('input_invalid', issues[0]?.message, { issues })
  return Object.fromEntries(Object.entries({ ...before, ...Object.fromEntries(given.map(([key, text]) => [key, text])) }).filter(([, text]) => text !== ''))
}

/** The kept answers as the reader takes them, with the school's bench profiles. */
export function helpFrom(kept: KeptAnswers): SheetHelp {
  const columns: ColumnChoices = {}
  const answers: SheetAnswers = {}
  for (const [key, text] of Object.entries(kept)) {
    const column = columnKey.exec(key)?.[1]
    if (isSheetField(key)) answers[key] = text
    if (column === undefined) continue
    const [quantity = '', unit = ''] = text.split(' ')
    columns[column] = { ...(isColumnQuantity(quantity) ? { quantity } : {}), ...(isSheetUnit(unit) ? { unit } : {}) }
  }
  const profile = benchProfiles.find(one => one.bench.toLowerCase() === answers.bench?.toLowerCase()) ?? null
  return { profile, profiles: benchProfiles, columns, answers }
}
