import type { ColumnQuantity, SheetField, SheetUnit } from '#shared/domain/airflow/sheet/sheet-reading'
import { unitTable } from '#shared/domain/units/unit-table'

/** What a column may be said to hold. */
export const columnQuantities = ['lift', 'pressure', 'flow', 'reading', 'range', 'leak', 'note', 'date', 'plate', 'temperature', 'barometer', 'humidity', 'run', 'cylinder', 'side', 'other'] as const satisfies readonly ColumnQuantity[]

/** What the reader may ask for. */
export const sheetFields = ['bench', 'date', 'cylinder', 'side', 'stage', 'valve', 'stem', 'pressure', 'lift-unit', 'flow-unit', 'pressure-unit', 'full-scale', 'columns', 'plate-nominal'] as const satisfies readonly SheetField[]

/** Units a column may be in. */
export const sheetUnits = [...Object.keys(unitTable), 'percent', 'thousandths', 'lift/diameter'] as SheetUnit[]

export const isColumnQuantity = (word: string): word is ColumnQuantity => (columnQuantities as readonly string[]).includes(word)
export const isSheetField = (word: string): word is SheetField => (sheetFields as readonly string[]).includes(word)
export const isSheetUnit = (word: string): word is SheetUnit => (sheetUnits as readonly string[]).includes(word)
