import { Refusal } from '#server/utils/refusal'
import type { SheetInput } from '#shared/contract/inputs'
import { plainText } from '#shared/domain/airflow/sheet/plain-text'
import { readCylinder } from '#shared/domain/airflow/sheet/read-header-value'
import type { SheetAnswers, SheetField } from '#shared/domain/airflow/sheet/sheet-reading'

const fields: Record<SheetField, true> = {
  'bench': true, 'date': true, 'cylinder': true, 'side': true, 'stage': true, 'valve': true, 'stem': true, 'pressure': true,
  'lift-unit': true, 'flow-unit': true, 'pressure-unit': true, 'full-scale': true, 'columns': true, 'plate-nominal': true,
}
const isField = (text: string): text is SheetField => Object.hasOwn(fields, text)

/**
 * The answers a reading goes by: those of the reading before, with the new ones over them; an empty one takes an answer back.
 * A bench that was picked is an answer like the others.
 *
 * @throws {Refusal} input_invalid for what is no question of a sheet; port_not_on_head
 */
export function sheetAnswers(before: Readonly<Record<string, string>>, given: Pick<SheetInput, 'answers' | 'bench'>, cylinders: number): SheetAnswers {
  const unknown = Object.keys(given.answers ?? {}).filter(field => !isField(field))
  if (unknown.length > 0) {
    const issues = unknown.map(field => ({ path: `answers.${field}`, code: 'no-question', message: `"${field}" is no question of a sheet. Questions are ${Object.keys(fields).join(', ')}.` }))
    throw new Refusal('input_invalid', issues[0]?.message, { issues })
  }
  const answers: SheetAnswers = {}
  for (const [field, text] of Object.entries({ ...before, ...given.answers, ...(given.bench === undefined ? {} : { bench: given.bench }) })) {
    if (isField(field) && text.trim() !== '') answers[field] = text
  }
  const cylinder = answers.cylinder === undefined ? null : readCylinder(plainText(answers.cylinder))
  if (cylinder !== null && cylinder > cylinders) throw new Refusal('port_not_on_head', `This head has ${cylinders} cylinders and no cylinder ${cylinder}.`)
  return answers
}
