import { readSpreadsheet } from '#server/adapters/sheets/spreadsheet'
import { Refusal } from '#server/utils/refusal'
import { decodeSheetBytes } from '#shared/domain/airflow/sheet/decode-sheet-bytes'
import type { SheetTable } from '#shared/domain/airflow/sheet/sheet-reading'
import { splitDelimitedText } from '#shared/domain/airflow/sheet/split-delimited-text'

/**
 * A file as tables of cells that have something in them: one for a text, one a worksheet for a spreadsheet.
 *
 * @param type as detected from the bytes
 * @throws {Refusal} sheet_unreadable
 * @throws {AdapterRefusal} sheet_unreadable, sheet_too_large
 */
export async function sheetTables(bytes: Uint8Array, type: string): Promise<[SheetTable, ...SheetTable[]]> {
  const tables = type === 'text/plain' ? [fromText(bytes)] : await readSpreadsheet(bytes)
  const [first, ...rest] = tables.filter(table => table.rows.some(row => row.some(cell => cell.trim() !== '')))
  if (!first) throw new Refusal('sheet_unreadable', 'There is nothing in this sheet.')
  return [first, ...rest]
}

function fromText(bytes: Uint8Array): SheetTable {
  const text = decodeSheetBytes(bytes)
  // Only the first bytes were looked at when it came.
  if (text.includes('\0')) throw new Refusal('sheet_unreadable', 'This is no text: save the sheet as CSV or XLSX and send that.')
  return splitDelimitedText(text)
}
