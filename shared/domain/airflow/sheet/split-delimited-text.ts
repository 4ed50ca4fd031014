import papa from 'papaparse'
import type { SheetTable } from './sheet-reading'

/**
 * Rows and cells of a delimited text: TAB, semicolon, bar or comma, whichever most lines have, in that order; columns set with
 * spaces where none of them is. A decimal comma therefore never splits a semicolon file.
 *
 * @throws {RangeError} on text with NUL in it: that is no text file
 */
export function splitDelimitedText(text: string): SheetTable {
  if (text.includes('\0')) throw new RangeError('splitDelimitedText requires text')
  const lines = text.replace(/^\uFEFF/, '').split(/\r\n|\r|\n/)
  const filled = lines.filter(line => line.trim() !== '')
  const delimiter = ['\t', ';', '|', ','].find(sign => filled.filter(line => line.includes(sign)).length >= filled.length / 2)
    ?? ['\t', ';', ','].find(sign => filled.filter(line => line.includes(sign)).length >= 3 && !filled.some(line => /\S {2,}\S/.test(line)))
  if (delimiter === undefined) return { rows: lines.map(line => line.trim() === '' ? [''] : line.trim().split(/ {2,}/)) }
  // Line ends are made alike first: files that were passed between machines mix them.
  const { data } = papa.parse<string[]>(lines.join('\n'), { delimiter, newline: '\n' })
  return { rows: data }
}
