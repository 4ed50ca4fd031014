import type { UnitName } from '../../units/unit-table'
import type { Side } from '../../units/port'
import type { FlowRun, SheetHeader } from '../flow-run'
import type { PlateDrift } from '../plate-drift'

/** A sheet as cells, already split; rows may differ in length. */
export interface SheetTable { rows: string[][] }

/** What a number of a sheet can be in: a unit of the table, or one of the ratios benches write. */
export type SheetUnit = UnitName | 'percent' | 'thousandths' | 'lift/diameter'

/** What a column holds. `other` is read by nobody: coefficients, totals, gains. */
export type ColumnQuantity =
  | 'lift' | 'pressure' | 'flow' | 'reading' | 'range' | 'leak' | 'note' | 'date' | 'plate'
  | 'temperature' | 'barometer' | 'humidity' | 'run' | 'cylinder' | 'side' | 'other'

/** One column, what it was taken for, and where its unit came from. */
export interface SheetColumn {
  index: number
  heading: string
  quantity: ColumnQuantity
  unit: SheetUnit | null
  unitFrom: 'heading' | 'cells' | 'profile' | 'choice' | null
  /** Which of several runs side by side it belongs to; null when shared or when there is one. */
  run: string | null
  cylinder: number | null
  side: Side | null
}

/** What a person chose for a column, by its index as text. */
export type ColumnChoices = Record<string, { quantity?: ColumnQuantity, unit?: SheetUnit }>

/** How one bench writes its sheets. Helps where a sheet is silent; what a sheet says itself wins. */
export interface BenchProfile {
  bench: string
  decimal: '.' | ','
  /** Heading as this bench writes it, and what it means. */
  columns: Record<string, { quantity: ColumnQuantity, unit: SheetUnit | null }>
  /** Test pressure where the sheet gives none. */
  pressure: { value: number, unit: UnitName } | null
  /** Full scale of each range, cfm. */
  fullScaleCfm: Record<string, number> | null
  plateNominal: { value: number, unit: UnitName } | null
  /** True where the bench itself brings flow to 1.2041 kg/m3. */
  densityCorrected: boolean
  traits: string
}

/** Something a person should know of the sheet. Nothing is ever repaired because of it. */
export interface SheetFinding {
  code: SheetFindingCode
  /** note: good to know; ask: answer or re-take before this counts; refuse: this sheet cannot be right. */
  severity: 'note' | 'ask' | 'refuse'
  /** mm. */
  lifts: number[]
  text: string
}

export type SheetFindingCode =
  | 'missing-point' | 'note-in-cell' | 'lift-read-twice' | 'several-runs' | 'own-mean-ignored' | 'own-flow-differs' | 'nominal-size' | 'air-not-given' | 'no-plate'
  | 'ambiguous-date' | 'ambiguous-number' | 'not-a-curve' | 'lift-out-of-bounds' | 'plate-out' | 'range-at-other-pressure'
  | 'leak-large' | 'leak-in-curve' | 'coefficient-over-one' | 'coefficient-high' | 'low-lift-coefficient-small' | 'pressure-sag' | 'bench-limit' | 'lift-zero-off'
  | 'not-rising' | 'point-off-curve' | 'wrong-pressure' | 'setup-differs' | 'cylinder-spread' | 'bench-drift' | 'plate-off-line'

/** A question the sheet leaves open. `field` is the key of the answer. */
export interface SheetNeed { field: SheetField, question: string }

export type SheetField =
  | 'bench' | 'date' | 'cylinder' | 'side' | 'stage' | 'valve' | 'stem' | 'pressure' | 'lift-unit' | 'flow-unit' | 'pressure-unit' | 'full-scale' | 'columns' | 'plate-nominal'

export type SheetAnswers = Partial<Record<SheetField, string>>

/** A plate log in place of a flow sheet. */
export interface PlateLog {
  unit: SheetUnit | null
  nominal: number | null
  entries: { date: string, reading: number, remark: string }[]
  /** Days counted from the first entry; null with fewer than four. */
  drift: Omit<PlateDrift, 'at'> | null
}

/** Everything the reader made of a sheet. */
export interface SheetReading {
  kind: 'flow' | 'plate-log'
  header: SheetHeader
  runs: FlowRun[]
  columns: SheetColumn[]
  findings: SheetFinding[]
  needs: SheetNeed[]
  plateLog: PlateLog | null
}
