import type { Evaluator } from '../evidence'
import { flowValue } from './flow-value'

/** Bench against its plate, from the sheets of the stage: the one furthest off. */
export const plateDifference: Evaluator = (evidence) => {
  const sheets = evidence.sheets.filter(sheet => sheet.op === evidence.op && sheet.header.plateGiven)
  const [worst] = sheets.map(sheet => 100 * (sheet.header.plateRatio - 1)).sort((a, b) => Math.abs(b) - Math.abs(a))
  if (worst === undefined) return { notAssessed: 'No sheet of this stage gives the plate of its day beside the nominal.' }
  return { values: [flowValue({ value: worst, unit: '%', trace: [{ what: 'plate today over its nominal, the sheet furthest off', sum: `100 x (${(1 + worst / 100).toFixed(5)} - 1), ${sheets.length} sheets`, gives: `${worst.toFixed(2)} %` }] })] }
}
