import type { SheetColumn } from '#server/db/entities/FlowSheet'
import { plainText } from '#shared/domain/airflow/sheet/plain-text'
import type { ColumnChoices, SheetReading, SheetTable } from '#shared/domain/airflow/sheet/sheet-reading'

/** Rows and columns a person is shown to see for themselves what was read. */
const shown = { rows: 24, columns: 64, characters: 200 }

/** How a column that a person chose is told from one the sheet explained itself. */
export const asChosen = 'as chosen'

const from: Readonly<Record<string, string>> = { heading: 'as the sheet says', cells: 'as written beside the figures', profile: 'as this bench writes', choice: 'as answered' }

/** The table as it stands in the file from its headings on, and over each of its columns what it was read as; one nobody reads has no meaning. */
export function sheetPreview(table: SheetTable, reading: Pick<SheetReading, 'columns'>, choices: ColumnChoices): { columns: SheetColumn[], firstRows: string[][] } {
  const start = Math.max(0, table.rows.findIndex(row => reading.columns.filter(column => isHeading(row[column.index], column.heading)).length >= 2))
  const firstRows = table.rows.slice(start, start + shown.rows).map(row => row.slice(0, shown.columns).map(cell => cell.slice(0, shown.characters)))
  const width = Math.max(0, ...firstRows.map(row => row.length))
  const columns = Array.from({ length: width }, (_, index): SheetColumn => {
    const read = reading.columns.find(column => column.index === index)
    const chosen = Object.hasOwn(choices, String(index)) ? asChosen : ''
    if (!read || read.quantity === 'other') return { heading: read?.heading ?? '', meaning: null, unit: null, from: chosen }
    return { heading: read.heading, meaning: read.quantity, unit: read.unit, from: chosen !== '' ? chosen : read.unitFrom === null ? '' : from[read.unitFrom] ?? '' }
  })
  return { columns, firstRows }
}

function isHeading(cell: string | undefined, heading: string): boolean {
  const text = plainText(cell ?? '')
  return text !== '' && !/^[\d.,]+$/.test(text) && heading.includes(text)
}
