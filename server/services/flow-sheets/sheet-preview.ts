import type { SheetColumn } from '#server/db/entities/FlowSheet'
import { plainText } from '#shared/domain/airflow/sheet/plain-text'
import type { SheetReading, SheetTable } from '#shared/domain/airflow/sheet/sheet-reading'

/** Rows a person is shown to see for themselves what was read. */
const shown = 24

const from: Readonly<Record<string, string>> = { heading: 'as the sheet says', cells: 'as written beside the figures', profile: 'as this bench writes', choice: 'as answered' }

/** The table as it stands in the file from its headings on, and over each of its columns what it was read as. */
export function sheetPreview(table: SheetTable, reading: Pick<SheetReading, 'columns'>): { columns: SheetColumn[], firstRows: string[][] } {
  const start = Math.max(0, table.rows.findIndex(row => reading.columns.filter(column => isHeading(row[column.index], column.heading)).length >= 2))
  const firstRows = table.rows.slice(start, start + shown)
  const width = Math.max(0, ...firstRows.map(row => row.length))
  const columns = Array.from({ length: width }, (_, index): SheetColumn => {
    const read = reading.columns.find(column => column.index === index)
    return read === undefined || read.quantity === 'other'
      ? { heading: read?.heading ?? '', meaning: null, unit: null, from: '' }
      : { heading: read.heading, meaning: read.quantity, unit: read.unit, from: read.unitFrom === null ? '' : from[read.unitFrom] ?? '' }
  })
  return { columns, firstRows }
}

function isHeading(cell: string | undefined, heading: string): boolean {
  const text = plainText(cell ?? '')
  return text !== '' && !/^[\d.,]+$/.test(text) && heading.includes(text)
}
