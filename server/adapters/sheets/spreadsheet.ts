import { zipSync } from 'fflate'
import readWorkbook from 'read-excel-file/universal'
import { AdapterRefusal } from '../adapter-refusal'
import { unpackZip } from './unpack-zip'

export interface Worksheet { name: string, rows: string[][] }

export const spreadsheetLimits = { bytes: 50 * 1024 ** 2, entries: 200, rows: 5_000, columns: 200 } as const

const unreadable = () => new AdapterRefusal('sheet_unreadable', 'The spreadsheet cannot be read. Save it again as XLSX, or send it as CSV.')
const tooLarge = () => new AdapterRefusal('sheet_too_large', 'The spreadsheet is larger than a flow sheet can be: at most 5,000 rows and 200 columns. Send only the sheet with the readings.')

/**
 * Every worksheet of an XLSX file as rows of text, in order; an empty cell is an empty text.
 *
 * A formula gives the value the program that saved it had computed. A number gives its shortest decimal form, since XLSX keeps
 * 41.98 as 41.979999999999997. A date gives its ISO day, with the time when it has one.
 *
 * What is parsed is exactly what was unpacked under the limits, never the file as sent.
 *
 * @throws {AdapterRefusal} sheet_unreadable, sheet_too_large
 */
export async function readSpreadsheet(file: Uint8Array): Promise<Worksheet[]> {
  const files = unpackZip(file, spreadsheetLimits)
  if (!files.has('[Content_Types].xml') || !files.has('xl/workbook.xml')) throw unreadable()
  let rows = 0
  const wanted: Record<string, Uint8Array> = {}
  for (const [name, body] of files) {
    if (!/\.(xml|rels)$/.test(name)) continue
    const text = new TextDecoder('utf-8').decode(body)
    // The format forbids document types; only an attack has one.
    if (text.includes('<!DOCTYPE') || text.includes('<!ENTITY')) throw unreadable()
    if (/^xl\/worksheets\/[^/]+\.xml$/.test(name)) rows += countRows(text)
    wanted[name] = body
  }
  if (rows > spreadsheetLimits.rows) throw tooLarge()

  const packed = zipSync(wanted, { level: 0 })
  try {
    const sheets = await readWorkbook(packed.slice().buffer, { trim: false, parseNumber: shortest })
    return sheets.map(({ sheet, data }) => ({ name: sheet, rows: data.map(row => row.map(toText)) }))
  }
  catch {
    throw unreadable()
  }
}

/**
 * How many rows the worksheet reaches down, from the addresses in it: one cell at the far end of an empty sheet would otherwise
 * cost the memory of a full one.
 *
 * @throws {AdapterRefusal} sheet_too_large when it reaches further right than a flow sheet can
 */
function countRows(xml: string): number {
  let last = 0
  let rows = 0
  for (const [tag] of xml.matchAll(/<(?:\w+:)?row\b[^>]*>/g)) {
    rows++
    last = Math.max(last, Number(/\br="(\d+)"/.exec(tag)?.[1] ?? 0))
  }
  for (const [, letters = '', number = ''] of xml.matchAll(/<(?:\w+:)?c\b[^>]*?\br="([A-Z]+)(\d+)"/g)) {
    if (columnNumber(letters) > spreadsheetLimits.columns) throw tooLarge()
    last = Math.max(last, Number(number))
  }
  return Math.max(rows, last)
}

const columnNumber = (letters: string) => [...letters].reduce((sum, letter) => sum * 26 + letter.charCodeAt(0) - 64, 0)

const shortest = (text: string) => {
  const value = Number(text)
  return Number.isFinite(value) && text.trim() !== '' ? String(value) : text
}

function toText(cell: unknown): string {
  if (cell === null || cell === undefined) return ''
  if (cell instanceof Date) {
    if (Number.isNaN(cell.getTime())) return ''
    const iso = cell.toISOString()
    return iso.endsWith('T00:00:00.000Z') ? iso.slice(0, 10) : iso.slice(0, 19)
  }
  return String(cell)
}
