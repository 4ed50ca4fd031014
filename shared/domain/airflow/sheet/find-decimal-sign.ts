import { plainText } from './plain-text'
import type { SheetTable } from './sheet-reading'

/**
 * Which sign a sheet writes its decimals with, judged from all of it; undefined when nothing tells.
 *
 * Only numbers that can be read one way count: "0,05", "41,0", "1.007,6" say comma; "28.0", "0.050", "1,013.2" say point. "1,234" says
 * nothing. Dates are not numbers. Where both are written, the sign of the larger number of cells wins only if the other has under
 * a tenth of them: a mixed sheet is asked about number by number.
 */
export function findDecimalSign(table: SheetTable): '.' | ',' | undefined {
  let commas = 0
  let points = 0
  for (const cell of table.rows.flat()) {
    for (const [number] of plainText(cell).matchAll(/(?<![\d.,/:-])\d[\d.,]*\d(?![\d.,/:-]*\d)/g)) {
      const decimal = decimalOf(number)
      if (decimal === ',') commas++
      if (decimal === '.') points++
    }
  }
  if (commas > 10 * points) return ','
  if (points > 10 * commas) return '.'
  return undefined
}

function decimalOf(number: string): '.' | ',' | null {
  const signs = number.replace(/\d/g, '')
  if (signs === '') return null
  if (signs === ',.') return '.'
  if (signs === '.,') return ','
  // "28.000" or "1,234" alone could be thousands; a nought in front, or another number of places, cannot.
  if (signs === ',') return /^0,|,(?:\d{1,2}|\d{4,})$/.test(number) ? ',' : null
  if (signs === '.') return /^0\.|\.(?:\d{1,2}|\d{4,})$/.test(number) ? '.' : null
  return null
}
