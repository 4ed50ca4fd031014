/** One line of the working behind a value, written so that a person can follow it on paper. */
export interface TraceStep {
  /** What this step does: "mean of three directions". */
  what: string
  /** The sum itself with its numbers: "(36.48 + 36.52 + 36.50) / 3". */
  sum: string
  /** The result with its unit: "36.50 mm". */
  gives: string
}

/** A value with its doubt. `standardUncertainty` is null for counts and yes/no, which have none. */
export interface Evaluated {
  value: number
  unit: string
  standardUncertainty: number | null
  /** Effective degrees of freedom; null when the doubt is all of type B (taken as infinite). */
  degreesOfFreedom: number | null
  /** Spot on the iron in the words of the casting card or the clock ("12", "bowl, fore"); null when the value is of the whole port or head. */
  at: string | null
  /** Lift in mm the value belongs to; null when it is not of one lift. */
  liftMm: number | null
  trace: TraceStep[]
}
