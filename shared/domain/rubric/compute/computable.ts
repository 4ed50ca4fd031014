import type { TraceStep } from '../../uncertainty/evaluated'

/** One input of a computable quantity. Bounds are inclusive; they keep a slip of the unit, and a day's worth of work, out. */
export type ComputeInput =
  | { name: string, kind: 'number', unit: string, least: number, most: number, optional?: boolean }
  | { name: string, kind: 'integer', unit: string, least: number, most: number, optional?: boolean }
  | { name: string, kind: 'numbers', unit: string, least: number, most: number, fewest: number, longest: number, optional?: boolean }
  | { name: string, kind: 'choice', choices: readonly string[], optional?: boolean }
  | { name: string, kind: 'text', longest: number, optional?: boolean }

/** What came in, after it was checked against the inputs. */
export interface Checked {
  number: (name: string) => number
  /** Null when an optional input was left out. */
  numberOrNull: (name: string) => number | null
  numbers: (name: string) => number[]
  numbersOrNull: (name: string) => number[] | null
  text: (name: string) => string
  textOrNull: (name: string) => string | null
}

/** What goes out. */
export interface Computed {
  value: number | number[]
  unit: string
  standardUncertainty?: number
  trace: TraceStep[]
}

/** A quantity that can be computed by anybody who wants to check one by hand. */
export interface Computable {
  name: string
  title: string
  inputs: readonly ComputeInput[]
  unit: string
  source: string
  compute: (given: Checked) => Computed
}
