/** One column of a `UiDataTable`. `value` is what is shown and sorted by; a slot `cell-<key>` draws more. */
export interface TableColumn<Row> {
  key: string
  label: string
  value: (row: Row) => string | number | null
  numeric?: boolean
  sortable?: boolean
  /** Left off on a phone. */
  wideOnly?: boolean
}
export interface TableSort { key: string, direction: 'ascending' | 'descending' }

/** Rows in the order asked for; nothing ("not read") always last, whichever way. Numbers by size, words by the alphabet. */
export function sortRows<Row>(rows: readonly Row[], column: TableColumn<Row> | undefined, direction: TableSort['direction']): Row[] {
  if (!column) return [...rows]
  const sign = direction === 'ascending' ? 1 : -1
  return [...rows].sort((one, other) => {
    const [a, b] = [column.value(one), column.value(other)]
    if (a === null || b === null) return a === b ? 0 : a === null ? 1 : -1
    return sign * (typeof a === 'number' && typeof b === 'number' ? a - b : String(a).localeCompare(String(b), 'en', { numeric: true }))
  })
}
